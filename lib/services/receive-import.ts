import 'server-only';
import { randomUUID } from 'node:crypto';
import type { PersonRow } from '@/db/queries/people';
import { importsOf } from '@/db/queries/imports';
import { WitnessmarkError } from '@/lib/errors';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import { isAcceptableText } from '@/lib/evidence/text';
import { maxZipBytes } from '@/lib/evidence/zip-directory';
import { dropBlob, receiveBlob, type IncomingBlob } from '@/lib/ports/blob-store';
import { now } from '@/lib/ports/clock';
import {
  dropImport,
  importZip,
  readImportNote,
  stageImport,
  stagedImports,
  writeImportNote,
} from '@/lib/ports/import-store';
import { findOut, mayBeKept, mostImports, type ImportNote } from '@/lib/services/staged-import';
import { readFromZip } from '@/lib/services/zip-file';

/** `record.json` of a thousand entries has some six million bytes; reading more of it would hold everybody up. */
export const mostRecordBytes = 8_000_000;
const longestWaitMs = 24 * 60 * 60 * 1000;

/** One file of a person is on its way at a time: each may be a gigabyte. Next may load a module twice. */
const shared = globalThis as typeof globalThis & { witnessmarkImportsUnderWay?: Set<string> };

export interface ReceiveImport {
  person: PersonRow;
  fileName: string;
  body: AsyncIterable<Uint8Array>;
  declaredBytes?: number;
}

/**
 * Takes in a ZIP from another installation: streamed to disk, checked in a process of its own, and left waiting with
 * what was found until its owner decides. Of a file that may not be kept, only the finding stays.
 */
export async function receiveImport({ person, fileName, body, declaredBytes }: ReceiveImport): Promise<{ id: string }> {
  const underWay = (shared.witnessmarkImportsUnderWay ??= new Set());
  if (underWay.has(person.id)) {
    throw new WitnessmarkError('conflict', 'Another file of yours is still on its way. Send this one when it is done.');
  }
  underWay.add(person.id);
  try {
    await refuseBeforehand(person, declaredBytes);
    const blob = await receiveBlob(body, maxZipBytes);
    return await stage({ person, fileName, blob, declaredBytes });
  } finally {
    underWay.delete(person.id);
  }
} // prettier-ignore

async function refuseBeforehand(person: PersonRow, declaredBytes = 0): Promise<void> {
  if (declaredBytes > maxZipBytes) {
    throw new WitnessmarkError('too-large', `This file is over ${maxZipBytes / 1e9} GB, which is more than is taken in.`);
  }
  if ((await importsOf(person.id)).length >= mostImports) {
    throw new WitnessmarkError('too-large', `You keep ${mostImports} records from elsewhere already. Remove one first.`);
  }
} // prettier-ignore

async function stage(of: { person: PersonRow; fileName: string; blob: IncomingBlob; declaredBytes: number | undefined }) {
  const { person, fileName, blob, declaredBytes } = of;
  const id = randomUUID();
  try {
    if (declaredBytes !== undefined && declaredBytes !== blob.bytes) {
      throw new WitnessmarkError('conflict', 'The file did not arrive whole. Send it again.');
    }
    if (!/^PK/.test(blob.head.toString('latin1'))) {
      throw new WitnessmarkError('unsupported-file', 'This is no ZIP file. Give the export as it was downloaded; a packet or a record.json can be checked under “Check a packet”.');
    }
    // Only now: a file that is refused at once costs nobody what is waiting.
    await sweep(person);
    await stageImport(id, blob);
    await refuseHugeRecord(id);
    const receivedAt = now().toISOString();
    const found = await findOut({ person, id, place: 'incoming' });
    const { sha256, bytes } = blob;
    const note: ImportNote = { personId: person.id, fileName: shownName(fileName), sha256, bytes, receivedAt, checkedAt: receivedAt, ...found };
    if (!mayBeKept(found.finding)) await dropImport(id, 'incoming');
    await writeImportNote(id, 'incoming', note);
    return { id };
  } catch (error) {
    await dropBlob(blob);
    await dropImport(id, 'incoming');
    throw error;
  }
} // prettier-ignore

/** The directory alone says how long it is. A ZIP that cannot be read is left to the check, which says why. */
async function refuseHugeRecord(id: string): Promise<void> {
  let size: number | null;
  try {
    size = await readFromZip(importZip(id, 'incoming'), async (zip) => zip.sizeOf('record.json'));
  } catch (error) {
    if (error instanceof EvidenceError) return;
    throw error;
  }
  if (size !== null && size > mostRecordBytes) {
    throw new WitnessmarkError(
      'too-large',
      `The record.json in it has ${Math.ceil(size / 1e6)} MB, and no more than ${mostRecordBytes / 1e6} are taken in. It can still be checked, under “Check a packet”.`,
    );
  }
}

/** Only the last part of a path is a name, and what moves a line about has no place in one. */
function shownName(given: string): string {
  const name = given.replace(/^.*[/\\]/s, '').replace(/\p{C}/gu, '').normalize('NFC').slice(0, 200);
  return name !== '' && isAcceptableText(name) ? name : 'export.zip';
} // prettier-ignore

/** What the same person sent before and left, and what anybody left for a day. */
async function sweep(person: PersonRow): Promise<void> {
  for (const { id, sinceMs } of await stagedImports()) {
    const note = await readImportNote<ImportNote>(id, 'incoming').catch(() => null);
    if (note?.personId === person.id || Date.now() - sinceMs > longestWaitMs) await dropImport(id, 'incoming');
  }
}
