import 'server-only';
import type { PersonRow } from '@/db/queries/people';
import { findImport, importsOf, type ImportedRecordRow } from '@/db/queries/imports';
import { authorise } from '@/lib/auth/guard';
import { WitnessmarkError, notFound } from '@/lib/errors';
import { parseBundle } from '@/lib/evidence/bundle';
import { fromUtf8 } from '@/lib/evidence/bytes';
import type { BundleFile } from '@/lib/evidence/format';
import { importZip, readImportNote } from '@/lib/ports/import-store';
import { recordName } from '@/lib/services/keep-import';
import { mayBeKept, readStagedImport, type ImportNote } from '@/lib/services/staged-import';
import { readFromZip } from '@/lib/services/zip-file';

export interface ImportedRecord {
  row: ImportedRecordRow;
  note: ImportNote;
  /** The text of `record.json`. */
  recordText: string;
  /** Files that are in the ZIP, by SHA-256. */
  files: Map<string, BundleFile>;
}

/** A record brought in from elsewhere, for whoever brought it in: what was found when it was checked. */
export async function readImported({ person, id }: { person: PersonRow; id: string }): Promise<ImportedRecord> {
  await authorise({ person, action: 'hold-import', import: id });
  const [row, note] = await Promise.all([findImport(id), readImportNote<ImportNote>(id, 'kept')]);
  if (row === null) throw notFound('imported record');
  if (note === null) {
    throw new WitnessmarkError('gone', 'The file of this record is gone from the server. Bring it in again.');
  }
  const recordText = await recordTextOf(id);
  return { row, note, recordText, files: filesOf(recordText) };
}

async function recordTextOf(id: string): Promise<string> {
  const bytes = await readFromZip(importZip(id, 'kept'), (zip) => zip.read('record.json'));
  if (bytes === null) throw notFound('imported record');
  return fromUtf8(bytes);
}

const filesOf = (recordText: string): Map<string, BundleFile> =>
  new Map(
    parseBundle(recordText)
      .files.filter(({ included }) => included)
      .map((file) => [file.sha256, file]),
  );

/** The files in the ZIP alone, for one picture after another. */
export async function filesInImport(id: string): Promise<Map<string, BundleFile>> {
  return filesOf(await recordTextOf(id));
}

export interface ListedImport {
  id: string;
  name: string;
  number: string;
  madeAt: string;
  size: number;
  bytes: number;
  importedAt: string;
}

/** What a person keeps from elsewhere, newest first. */
export async function listImports(person: PersonRow): Promise<ListedImport[]> {
  return (await importsOf(person.id)).map(({ id, name, number, madeAt, size, bytes, importedAt }) => ({
    id, name, number, madeAt, size, bytes, importedAt,
  })); // prettier-ignore
}

export interface StagedView {
  note: ImportNote;
  name: string;
  mayBeKept: boolean;
  /** The person keeps this very file already. */
  sameAs: ListedImport | null;
}

/** What was found in a file that waits for a decision. */
export async function readStaged({ person, id }: { person: PersonRow; id: string }): Promise<StagedView> {
  const note = await readStagedImport({ person, id });
  const same = (await importsOf(person.id)).find(({ fileSha256 }) => fileSha256 === note.sha256);
  return {
    note,
    name: recordName(note.finding),
    mayBeKept: mayBeKept(note.finding),
    sameAs: same === undefined ? null : (await listImports(person)).find(({ id }) => id === same.id)!,
  };
}
