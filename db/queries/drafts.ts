import 'server-only';
import { Op, QueryTypes } from 'sequelize';
import { database, type Transaction } from '../index';
import {
  draftChanges,
  drafts,
  files,
  uploads,
  type DraftChangeRow,
  type DraftRow,
  type FileRow,
  type UploadRow,
} from '../models/drafts';

export interface UploadWithFiles {
  upload: UploadRow;
  file: FileRow;
  copy: FileRow | null;
}

const inside = (transaction?: Transaction) => (transaction ? { transaction } : {});

export function draftById(id: string, transaction?: Transaction): Promise<DraftRow | null> {
  return drafts.find({ id }, inside(transaction));
}

/** Open drafts of the given machines and shelves, the last touched first. */
export function openDraftsOf(subjectIds: string[]): Promise<DraftRow[]> {
  return drafts.all({ subjectId: subjectIds, state: 'open' }, { order: [['changedAt', 'DESC']] });
}

export function insertDraft(draft: DraftRow, transaction: Transaction): Promise<void> {
  return drafts.insert(draft, { transaction });
}

/** By server time, then by id: the order in which they arrived. */
export function changesOf(draftId: string, transaction?: Transaction): Promise<DraftChangeRow[]> {
  return draftChanges.all(
    { draftId },
    {
      order: [
        ['serverAt', 'ASC'],
        ['id', 'ASC'],
      ],
      ...inside(transaction),
    },
  );
}

export function countChanges(draftId: string, transaction: Transaction): Promise<number> {
  return draftChanges.count({ draftId }, { transaction });
}

/** Those that arrived at or after an instant, in the order of `changesOf`; '' asks for all. */
export function changesSince(draftId: string, since: string, transaction: Transaction): Promise<DraftChangeRow[]> {
  return draftChanges.all(
    { draftId, serverAt: { [Op.gte]: since } },
    {
      order: [
        ['serverAt', 'ASC'],
        ['id', 'ASC'],
      ],
      transaction,
    },
  );
}

/** How long all values a draft ever had are together. */
export async function countCharacters(draftId: string, transaction: Transaction): Promise<number> {
  const rows = await database().query<{ characters: number | null }>(
    'SELECT SUM(LENGTH(value)) AS characters FROM draft_changes WHERE draft_id = :draftId',
    { type: QueryTypes.SELECT, replacements: { draftId }, transaction },
  );
  return rows[0]?.characters ?? 0;
}

export function countOpenDrafts(subjectId: string, transaction: Transaction): Promise<number> {
  return drafts.count({ subjectId, state: 'open' }, { transaction });
}

/** Which of these change ids a draft has already. */
export async function knownChangeIds(draftId: string, ids: string[], transaction: Transaction): Promise<Set<string>> {
  const rows = await draftChanges.all({ draftId, id: ids }, { transaction });
  return new Set(rows.map((row) => row.id));
}

export async function insertChanges(rows: DraftChangeRow[], changedAt: string, transaction: Transaction) {
  const draftId = rows[0]?.draftId;
  if (draftId === undefined) return;
  await draftChanges.insertMany(rows, { transaction });
  await drafts.update({ id: draftId }, { changedAt }, { transaction });
}

/** False if the draft was not open any more. */
export async function closeDraft(
  id: string,
  values: { state: 'discarded' } | { state: 'sealed'; sealedLog: string; sealedSeq: number },
  changedAt: string,
  transaction: Transaction,
): Promise<boolean> {
  return (await drafts.update({ id, state: 'open' }, { ...values, changedAt }, { transaction })) === 1;
}

export async function moveDraft(id: string, subjectId: string, changedAt: string, transaction: Transaction) {
  await drafts.update({ id, state: 'open' }, { subjectId, changedAt }, { transaction });
}

/** A draft's uploads with the files they name, in the order they were received. */
export async function uploadsOf(draftId: string, transaction?: Transaction): Promise<UploadWithFiles[]> {
  const rows = await uploads.all(
    { draftId },
    {
      order: [
        ['receivedAt', 'ASC'],
        ['id', 'ASC'],
      ],
      ...inside(transaction),
    },
  );
  const hashes = rows.flatMap((row) => (row.copySha256 === null ? [row.sha256] : [row.sha256, row.copySha256]));
  const known = new Map((await files.all({ sha256: hashes }, inside(transaction))).map((file) => [file.sha256, file]));
  return rows.flatMap((upload) => {
    const file = known.get(upload.sha256);
    if (file === undefined) return [];
    return [{ upload, file, copy: upload.copySha256 === null ? null : (known.get(upload.copySha256) ?? null) }];
  });
}
