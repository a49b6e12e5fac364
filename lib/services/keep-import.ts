import 'server-only';
import { write } from '@/db/index';
import type { PersonRow } from '@/db/queries/people';
import { importsOf, insertImport, type ImportedRecordRow } from '@/db/queries/imports';
import { WitnessmarkError } from '@/lib/errors';
import type { Finding } from '@/lib/evidence/finding';
import type { OpeningBody } from '@/lib/evidence/format';
import { now } from '@/lib/ports/clock';
import { dropImport, keepStagedImport } from '@/lib/ports/import-store';
import { machineLogOf, mayBeKept, mostImports, readStagedImport, type ImportNote } from '@/lib/services/staged-import';

const longestName = 120;

/**
 * Keeps a waiting file as a record from elsewhere: as it came, to be read and never continued. Throws `conflict` if it
 * is altered or kept already.
 */
export async function keepImport({ person, id }: { person: PersonRow; id: string }): Promise<{ id: string }> {
  const note = await readStagedImport({ person, id });
  if (!mayBeKept(note.finding)) {
    throw new WitnessmarkError('conflict', 'This file is not what was sealed, so it is not kept. Ask for another export.');
  }
  const row = rowOf(person, id, note);
  await refuseTwice(await importsOf(person.id), row);
  // On disk for good first: a row never names what is not there.
  await keepStagedImport(id);
  try {
    await write(async (transaction) => {
      await refuseTwice(await importsOf(person.id, { transaction }), row);
      await insertImport(row, transaction);
    });
  } catch (error) {
    await dropImport(id, 'kept');
    throw error;
  }
  return { id };
} // prettier-ignore

async function refuseTwice(kept: ImportedRecordRow[], row: ImportedRecordRow): Promise<void> {
  if (kept.some(({ fileSha256 }) => fileSha256 === row.fileSha256)) {
    throw new WitnessmarkError('conflict', 'You keep this very file already.');
  }
  if (kept.length >= mostImports) {
    throw new WitnessmarkError('too-large', `You keep ${mostImports} records from elsewhere already. Remove one first.`);
  }
} // prettier-ignore

function rowOf(person: PersonRow, id: string, note: ImportNote): ImportedRecordRow {
  const { finding, sha256, bytes } = note;
  const log = machineLogOf(finding);
  if (log?.checkpoint == null || finding.bundle === null) {
    throw new WitnessmarkError('conflict', 'This file holds no record of a machine, so it is not kept.');
  }
  return {
    id,
    personId: person.id,
    name: recordName(finding),
    number: finding.bundle.number,
    madeAt: finding.bundle.madeAt,
    logId: log.id,
    size: log.checkpoint.size,
    root: log.checkpoint.root,
    outcome: finding.outcome,
    fileSha256: sha256,
    bytes,
    importedAt: now().toISOString(),
    removedAt: null,
  };
}

/** What the record calls its machine. Somebody else wrote it: only texts count, and not at any length. */
export function recordName(finding: Finding): string {
  const opening = finding.entries.find(({ log, seq }) => seq === 0 && log === machineLogOf(finding)?.id);
  const body = opening?.openedParts.find(({ name }) => name === 'body')?.value as Partial<OpeningBody> | undefined;
  const words = [body?.modelYear, body?.make, body?.model].filter((word) => typeof word === 'string' && word !== '');
  const name = words.join(' ');
  if (name === '') return 'A machine that is not named';
  return name.length > longestName ? `${name.slice(0, longestName - 1)}…` : name;
}
