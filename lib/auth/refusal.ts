import 'server-only';
import { randomBytes } from 'node:crypto';
import type { z } from 'zod';
import { WitnessmarkError, type FieldErrors } from '@/lib/errors';

const isFull = (error: unknown) => {
  const { code, errno, message } = (error ?? {}) as { code?: unknown; errno?: unknown; message?: unknown };
  return code === 'ENOSPC' || code === 'SQLITE_FULL' || errno === 13 || /SQLITE_FULL|ENOSPC/.test(String(message));
};

/**
 * Stacks only. An error of the database also carries its statement with every value in it: hashes of passwords, what
 * was typed.
 */
function whatHappened(error: unknown): string {
  if (!(error instanceof Error)) return `a ${typeof error} was thrown`;
  const cause = error.cause === undefined ? '' : `\ncaused by ${whatHappened(error.cause)}`;
  return `${error.stack ?? error.message}${cause}`;
}

/**
 * Any error as a refusal a person can read. What nobody foresaw goes to the log under a number the person can quote;
 * its own words stay there, for they may name files or hold what was typed.
 */
export function asRefusal(error: unknown): WitnessmarkError {
  if (error instanceof WitnessmarkError) {
    if (error.log !== undefined) console.error(`[${error.code}] ${error.log}`);
    return error;
  }
  if (isFull(error)) {
    console.error('[storage-full] The data folder has no room left.');
    return new WitnessmarkError(
      'storage-full',
      'There is no room left on this installation. Nothing was saved; tell whoever runs it, then try again.',
    );
  }
  const number = randomBytes(4).toString('hex');
  console.error(`[internal ${number}]`, whatHappened(error));
  return new WitnessmarkError(
    'internal',
    `Something went wrong on our side, and nothing was saved. Try again; if it stays so, tell your steward the number ${number}.`,
  );
}

/** The first sentence for each field. */
export function fieldErrors(error: z.ZodError): FieldErrors {
  const fields: FieldErrors = {};
  for (const issue of error.issues) {
    const name = issue.path.join('.');
    fields[name] ??= issue.message;
  }
  return fields;
}
