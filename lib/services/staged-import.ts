import 'server-only';
import type { PersonRow } from '@/db/queries/people';
import { importsOf, type ImportedRecordRow } from '@/db/queries/imports';
import { notFound } from '@/lib/errors';
import type { Comparison, Finding } from '@/lib/evidence/finding';
import { importZip, readImportNote, type ImportPlace } from '@/lib/ports/import-store';
import { checkExportFile } from '@/lib/services/check-export-file';

/** What was found in a file from elsewhere. It lies beside the file, before and after somebody decides to keep it. */
export interface ImportNote {
  personId: string;
  /** As the file was called. */
  fileName: string;
  sha256: string;
  bytes: number;
  receivedAt: string;
  checkedAt: string;
  finding: Finding;
  /** Compared with what the same person keeps of the same record already. */
  compared: { id: string; name: string; importedAt: string; comparison: Comparison } | null;
}

/** At most so many records are kept for one person. */
export const mostImports = 20;

/** What somebody sent and did not decide about yet. Whoever else asks is told that there is none. */
export async function readStagedImport({ person, id }: { person: PersonRow; id: string }): Promise<ImportNote> {
  const note = await readImportNote<ImportNote>(id, 'incoming');
  if (note === null || note.personId !== person.id) throw notFound('imported record');
  return note;
}

/** Whether this may be kept: an altered record is no record, and an unreadable file none at all. */
export const mayBeKept = ({ outcome }: Finding): boolean => outcome === 'unchanged';

export const machineLogOf = ({ logs }: Finding) => logs.find(({ subject }) => subject === 'machine');

/** The record of the same log that goes furthest of those the person keeps. */
export async function keptOfSameLog(person: PersonRow, finding: Finding): Promise<ImportedRecordRow | null> {
  const log = machineLogOf(finding);
  const same = (await importsOf(person.id)).filter(({ logId }) => logId === log?.id);
  return same.sort((a, b) => b.size - a.size)[0] ?? null;
}

/**
 * Checks a file, and compares it with what the person keeps of the same record. The outcome is the file's own: that
 * two files contradict each other alters neither, and both are worth keeping.
 */
export async function findOut(options: {
  person: PersonRow;
  id: string;
  place: ImportPlace;
  key?: string;
}): Promise<Pick<ImportNote, 'finding' | 'compared'>> {
  const { person, id, place, key } = options;
  const file = importZip(id, place);
  const given = key === undefined || key.trim() === '' ? {} : { key };
  const finding = await checkExportFile({ file, ...given });
  const older = finding.outcome === 'unreadable' ? null : await keptOfSameLog(person, finding);
  if (older === null) return { finding, compared: null };
  const { against } = await checkExportFile({ file, ...given, against: importZip(older.id, 'kept') });
  if (against === null) return { finding, compared: null };
  const { id: olderId, name, importedAt } = older;
  return { finding, compared: { id: olderId, name, importedAt, comparison: against } };
}
