import 'server-only';
import { createTransport, type SendMailOptions, type Transporter } from 'nodemailer';
import { z } from 'zod';
import { env } from '@/lib/env';
import { WitnessmarkError } from '@/lib/errors';
import { now } from './clock';
import { keepMail } from './mail-folder';

export interface Mail {
  to: string;
  subject: string;
  text: string;
  /** An address that ends mails of this kind for its reader by one POST, for the mail program's own button (RFC 8058). */
  unsubscribe?: string;
}

const address = z.email().max(254);
const shared = globalThis as typeof globalThis & { witnessmarkSmtp?: Transporter };

/**
 * Sends one plain-text mail to one address: by SMTP where it is set up, and otherwise into a file of the data folder.
 * A recipient that is not exactly one address, or a subject of more than one line, is refused before anything is sent.
 */
export async function sendMail(mail: Mail): Promise<void> {
  const options = composeMail(mail);
  if (env.smtp === undefined) {
    const composer = createTransport({ streamTransport: true, buffer: true, newline: 'unix' });
    const { message } = await composer.sendMail(options);
    await keepMail(message as Buffer, now());
    return;
  }
  shared.witnessmarkSmtp ??= createTransport(env.smtp, { disableFileAccess: true, disableUrlAccess: true });
  try {
    await shared.witnessmarkSmtp.sendMail(options);
  } catch (error) {
    const { code } = error as { code?: string };
    throw new WitnessmarkError('internal', 'The mail could not be sent. Try again in a few minutes.', {
      log: `The SMTP server did not take a mail (${code ?? 'no code'}).`,
      cause: error,
    });
  }
}

/** The message as the transport is given it. Throws on whatever could add a header or a second recipient. */
export function composeMail({ to, subject, text, unsubscribe }: Mail): SendMailOptions {
  if (!address.safeParse(to).success || /[\s,;:<>"()[\]\\]/.test(to)) {
    throw new WitnessmarkError('invalid-input', 'A mail goes to exactly one address, such as name@host.example.');
  }
  if (/[\u0000-\u001f\u007f\u0085\u2028\u2029]/.test(subject) || subject.length === 0 || subject.length > 200) {
    throw new WitnessmarkError('invalid-input', 'The subject of a mail is one line of at most 200 characters.');
  }
  if (unsubscribe !== undefined && !/^https?:\/\/[\x21-\x3b\x3d\x3f-\x7e]+$/.test(unsubscribe)) {
    throw new WitnessmarkError('invalid-input', 'An address in a header of a mail holds no space and no line end.');
  }
  return {
    // Names of people never go into headers: an address alone cannot be read as two.
    from: { name: 'Witnessmark', address: env.mailFrom },
    to: { name: '', address: to },
    subject,
    text,
    date: now(),
    headers: {
      'Auto-Submitted': 'auto-generated',
      ...(unsubscribe === undefined
        ? {}
        : { 'List-Unsubscribe': `<${unsubscribe}>`, 'List-Unsubscribe-Post': 'List-Unsubscribe=One-Click' }),
    },
  };
}
