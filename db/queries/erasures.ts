import 'server-only';
import type { Transaction } from '../index';
import { draftChanges, drafts, files, uploads, type DraftRow } from '../models/drafts';
import { entryParts, erasures, type ErasureRow } from '../models/logs';
import { machines } from '../models/machines';

const inside = (transaction?: Transaction) => (transaction ? { transaction } : {});

export function findErasure(
  part: Pick<ErasureRow, 'logId' | 'seq' | 'name'>,
  transaction?: Transaction,
): Promise<ErasureRow | null> {
  return erasures.find(part, inside(transaction));
}

/** What an entry of a log records as erased. */
export function erasuresRecordedBy(
  logId: string,
  recordedSeq: number,
  transaction?: Transaction,
): Promise<ErasureRow[]> {
  return erasures.all({ logId, recordedSeq }, inside(transaction));
}

/** What was erased of an entry. */
export function erasuresOfEntry(logId: string, seq: number): Promise<ErasureRow[]> {
  return erasures.all({ logId, seq });
}

/** Records that a part is erased, and erases it: the one deletion a log knows. */
export async function eraseEntryPart(erasure: ErasureRow, transaction: Transaction): Promise<void> {
  const { logId, seq, name } = erasure;
  await erasures.insert(erasure, { transaction });
  await entryParts.remove({ logId, seq, name }, { transaction });
}

/** The worksheet, receipt or addendum an entry was sealed from. */
export function draftSealedAs(
  sealedLog: string,
  sealedSeq: number,
  transaction: Transaction,
): Promise<DraftRow | null> {
  return drafts.find({ sealedLog, sealedSeq, state: 'sealed' }, { transaction });
}

export async function forgetChanges(draftId: string, ids: string[], transaction: Transaction): Promise<void> {
  if (ids.length > 0) await draftChanges.remove({ draftId, id: ids }, { transaction });
}

/** Forgets what was sent for a draft, names and camera times included. Returns every file it named. */
export async function forgetUploads(draftId: string, transaction: Transaction): Promise<string[]> {
  const rows = await uploads.all({ draftId }, { transaction });
  await uploads.remove({ draftId }, { transaction });
  return rows.flatMap(({ sha256, copySha256, thumbSha256 }) =>
    [sha256, copySha256, thumbSha256].filter((hash) => hash !== null),
  );
}

export async function forgetFiles(hashes: string[], transaction: Transaction): Promise<void> {
  if (hashes.length > 0) await files.remove({ sha256: hashes }, { transaction });
}

/** The disclosures of all attachments there are: those of one entry, and those of every other, in any log. */
export async function otherAttachmentParts(
  { logId, seq }: { logId: string; seq: number },
  transaction: Transaction,
): Promise<{ own: string[]; others: string[] }> {
  const rows = await entryParts.all({ name: 'attachments' }, { transaction });
  const isOwn = (row: (typeof rows)[number]) => row.logId === logId && row.seq === seq;
  return {
    own: rows.filter(isOwn).map(({ disclosure }) => disclosure),
    others: rows.filter((row) => !isOwn(row)).map(({ disclosure }) => disclosure),
  };
}

export async function blankIdentity(machineId: string, transaction: Transaction): Promise<void> {
  const blank = { vin: null, frameNumber: null, engineNumber: null, vinCheck: 'not checked' };
  await machines.update({ id: machineId }, blank, { transaction });
}
