import 'server-only';
import { findLogOf } from '@/db/queries/logs';
import type { LogRow } from '@/db/models/logs';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';
import { notFound } from '@/lib/errors';

/** The log of a machine or of a shelf. */
export type LogSubject = { machine: string } | { shelf: string };

/** The log an owner wants to add a line to. Throws `not-found` to everybody else, helpers included. */
export async function logOfOwner(options: { person: PersonRow; subject: LogSubject }): Promise<LogRow> {
  const { person, subject } = options;
  if ('machine' in subject) await authorise({ person, action: 'seal', machine: subject.machine });
  else await authorise({ person, action: 'confirm-receipt', shelf: subject.shelf });
  const log = await findLogOf('machine' in subject ? subject.machine : subject.shelf);
  if (log === null) throw notFound('record');
  return log;
}
