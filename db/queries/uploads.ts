import 'server-only';
import { Op, QueryTypes } from 'sequelize';
import { database, type Transaction } from '../index';
import { files, uploads, type FileRow, type UploadRow } from '../models/drafts';

export const findUpload = (id: string): Promise<UploadRow | null> => uploads.find({ id });

export const findFile = (sha256: string): Promise<FileRow | null> => files.find({ sha256 });

export const filesBySha256 = (hashes: string[], transaction?: Transaction): Promise<FileRow[]> =>
  files.all({ sha256: hashes }, transaction ? { transaction } : {});

/** Which of these files an upload still names, as original, shared copy or thumb. */
export async function filesNamedByUploads(hashes: string[], transaction: Transaction): Promise<string[]> {
  const rows = await uploads.all(
    { [Op.or]: [{ sha256: hashes }, { copySha256: hashes }, { thumbSha256: hashes }] },
    { transaction },
  );
  return rows.flatMap(({ sha256, copySha256, thumbSha256 }) =>
    [sha256, copySha256, thumbSha256].filter((hash) => hash !== null),
  );
}

/** How many bytes a person's uploads since an instant have together; a file sent twice counts twice. */
export async function bytesSentBy(personId: string, since: string): Promise<number> {
  const rows = await database().query<{ bytes: number | null }>(
    `SELECT SUM(f.bytes) AS bytes FROM uploads u JOIN files f ON f.sha256 = u.sha256
      WHERE u.person_id = :personId AND u.received_at > :since`,
    { type: QueryTypes.SELECT, replacements: { personId, since } },
  );
  return rows[0]?.bytes ?? 0;
}

/** Stores an upload and the files it names; a file already on record is left as it is. */
export async function insertUpload(upload: UploadRow, named: FileRow[], transaction: Transaction): Promise<void> {
  for (const file of named) {
    const known = await files.find({ sha256: file.sha256 }, { transaction });
    if (known === null) await files.insert(file, { transaction });
  }
  await uploads.insert(upload, { transaction });
}

/** The upload behind an original, a shared copy or a thumb, if it belongs to that machine or shelf. */
export async function uploadVisibleFrom(sha256: string, subjectId: string): Promise<UploadRow | null> {
  // A machine also shows the receipts of what was drawn for it, though they lie on a shelf, and what was sealed about
  // them later: `about` finds the purchase behind a line, however many lines refer to one another.
  const rows = await database().query<{ id: string }>(
    `WITH RECURSIVE found AS (
        SELECT u.id, d.subject_id, d.sealed_log, d.sealed_seq FROM uploads u JOIN drafts d ON d.id = u.draft_id
         WHERE u.sha256 = :sha256 OR u.copy_sha256 = :sha256 OR u.thumb_sha256 = :sha256),
      about (id, log_id, seq) AS (
        SELECT id, sealed_log, sealed_seq FROM found WHERE sealed_seq IS NOT NULL
        UNION SELECT a.id, a.log_id, e.refers_to_seq FROM about a JOIN entries e ON e.log_id = a.log_id AND e.seq = a.seq
         WHERE e.refers_to_seq IS NOT NULL)
      SELECT f.id FROM found f
       WHERE f.subject_id = :subjectId OR EXISTS (
         SELECT 1 FROM about a JOIN draws w ON w.shelf_log = a.log_id AND w.purchase_seq = a.seq
           JOIN logs l ON l.id = w.machine_log
          WHERE a.id = f.id AND l.subject_id = :subjectId)
       LIMIT 1`,
    { type: QueryTypes.SELECT, replacements: { sha256, subjectId } },
  );
  return rows[0] === undefined ? null : findUpload(rows[0].id);
}
