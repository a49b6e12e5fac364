import 'server-only';
import type { Transaction } from '@/db/index';
import { findEntry } from '@/db/queries/entries';
import { entryParts, type LogRow } from '@/db/models/logs';
import type { PersonRow } from '@/db/models/people';
import { notFound } from '@/lib/errors';
import { openDisclosure } from '@/lib/evidence/disclosure';
import type { Attachment } from '@/lib/evidence/format';
import { logOfOwner, type LogSubject } from './log-of-owner';

/** The pictures of an entry that readers get a shared copy of; none once they are erased. */
export async function picturesOf(logId: string, seq: number, transaction?: Transaction): Promise<Attachment[]> {
  const part = await entryParts.find({ logId, seq, name: 'attachments' }, transaction ? { transaction } : {});
  const attachments = part === null ? [] : (openDisclosure(part.disclosure).value as Attachment[]);
  return attachments.filter(({ copy }) => copy?.mediaType === 'image/jpeg');
}

/** What an owner chooses from, of a machine's entry or a line of a shelf's log. */
export async function picturesToBlackOut(options: {
  person: PersonRow;
  subject: LogSubject;
  seq: number;
}): Promise<{ log: LogRow; pictures: Attachment[] }> {
  const log = await logOfOwner(options);
  if ((await findEntry(log.id, options.seq)) === null) throw notFound('entry');
  return { log, pictures: await picturesOf(log.id, options.seq) };
}
