import { z } from 'zod';

/** An address in the one spelling kept: without spaces around it, lower case. */
export const emailField = z
  .string({ error: 'Type your e-mail address.' })
  .trim()
  .toLowerCase()
  .min(1, 'Type your e-mail address.')
  .max(254, 'An e-mail address has at most 254 characters.')
  .pipe(z.email('This is not an e-mail address. It should look like name@host.example.'));

const controls = /[\u0000-\u001f\u007f-\u009f\u2028\u2029]/;

export const nameField = z
  .string({ error: 'Type your name.' })
  .trim()
  .min(1, 'Type your name, as it should stand in the record.')
  .max(80, 'A name has at most 80 characters here.')
  .refine((name) => !controls.test(name), 'A name is one line of plain text.');

/** At sign-in nothing is judged but that something was typed; the limit bounds the work of hashing. */
export const givenPasswordField = z
  .string({ error: 'Type your password.' })
  .min(1, 'Type your password.')
  .max(1024, 'This is longer than any password here.');

/** A new password is judged by `passwordRefusal` in the use case, which knows whose it is. */
export const newPasswordField = z
  .string({ error: 'Choose a password.' })
  .min(1, 'Choose a password.')
  .max(1024, 'A password has at most 256 characters.');

export const timeZoneField = z
  .string({ error: 'Choose a time zone.' })
  .refine(
    (zone) => Intl.supportedValuesOf('timeZone').includes(zone) || zone === 'UTC',
    'Choose a time zone from the list.',
  );

export const idField = z.uuid('This is not an id.');
