import { fromUtf8 } from '@/lib/evidence/bytes';
import { maxBundleCharacters } from '@/lib/evidence/bundle';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import { attachmentsOf } from '@/lib/evidence/pdf-attachments';
import { parseSingleRevision, startsLikePdf } from '@/lib/evidence/pdf-revision';
import { type PageSignature, readPageSignature } from '@/lib/evidence/pdf-signature';
import { companionNames, type GivenFile } from '@/lib/evidence/verify-files';
import { readZip, startsLikeZip } from '@/lib/evidence/zip-archive';
import { foldedName } from '@/lib/evidence/zip-names';

const recordName = 'record.json';
/** UTF-8 takes up to three bytes for one UTF-16 character. */
const maxRecordBytes = maxBundleCharacters * 3;

/** What came out of a packet, an export or a bare record. */
export interface Container {
  kind: 'packet' | 'record' | 'export';
  bundleText: string;
  /** Undefined for a bare record: nothing lies beside it. */
  files: GivenFile[] | undefined;
  /** What the signature over a packet's pages amounts to; nothing else has any. */
  pages?: PageSignature;
}

/**
 * Takes the record out of whatever file a reader was given: a packet, an export or a bare `record.json`.
 *
 * @throws EvidenceError `unreadable`, with a sentence that says why
 * @example (await readContainer(bytes)).kind; // 'packet'
 */
export async function readContainer(bytes: Uint8Array): Promise<Container> {
  if (startsLikePdf(bytes)) return { kind: 'packet', ...(await extractFromPacket(bytes)) };
  if (startsLikeZip(bytes)) return { kind: 'export', ...extractFromExport(bytes) };
  if (bytes.length > maxRecordBytes) throw unreadable('This file is larger than any record.');
  return { kind: 'record', bundleText: recordText(bytes), files: undefined };
}

/**
 * Takes the record and the other attachments out of a packet, and checks the signature over its pages: a PDF of exactly
 * one revision with exactly one `record.json`, counted over every file that anything in it names.
 *
 * @throws EvidenceError `unreadable`, with a sentence that says why
 * @example (await extractFromPacket(bytes)).files.map((file) => file.name); // ['receipt-front.jpg']
 */
export async function extractFromPacket(
  bytes: Uint8Array,
): Promise<{ bundleText: string; files: GivenFile[]; pages: PageSignature }> {
  let attachments: GivenFile[];
  let pages: PageSignature;
  try {
    const context = await parseSingleRevision(bytes);
    attachments = attachmentsOf(context, maxRecordBytes);
    pages = readPageSignature(bytes, context);
  } catch (error) {
    if (error instanceof EvidenceError) throw error;
    throw unreadable('This PDF cannot be taken apart, so its record could not be read.');
  }
  const records = attachments.filter((file) => file.name.trim().toLowerCase() === recordName);
  const record = records[0];
  if (record === undefined)
    throw unreadable('This PDF carries no record.json: it is not a packet, or lost its attachments.');
  if (records.length > 1) {
    throw unreadable(
      `This PDF carries ${records.length} files called record.json, so it does not say which one counts.`,
    );
  }
  return { bundleText: recordText(record.bytes), files: attachments.filter((file) => file !== record), pages };
}

/**
 * Takes the record and the files beside it out of an export: a ZIP with exactly one `record.json`, at its top, counted
 * over every name that ends so in whatever letters.
 *
 * @throws EvidenceError `unreadable`, with a sentence that says why
 * @example extractFromExport(bytes).files.map((file) => file.name); // ['README.txt', 'originals/1-1-receipt.jpg', …]
 */
export function extractFromExport(bytes: Uint8Array): { bundleText: string; files: GivenFile[] } {
  const isRecord = (name: string) => foldedName(name).endsWith(recordName);
  const all = readZip(bytes, (name) => (isRecord(name) ? maxRecordBytes : Infinity));
  const records = all.filter((file) => isRecord(file.name));
  const record = records[0];
  if (record === undefined) throw unreadable('This ZIP file holds no record.json: it is not an export of a record.');
  if (records.length > 1) {
    throw unreadable(
      `This ZIP file holds ${records.length} files whose names end in record.json, so it does not say which one counts.`,
    );
  }
  if (record.name !== recordName) {
    throw unreadable(
      `The record in this ZIP file is called “${record.name}”. Pack the files themselves, not the folder around them.`,
    );
  }
  const isCompanion = (name: string) => companionNames.includes(name);
  const files = all
    .filter((file) => file !== record)
    .map((file) => (isCompanion(file.name) ? { ...file, isCompanion: true as const } : file));
  return { bundleText: recordText(record.bytes), files };
}

function recordText(bytes: Uint8Array): string {
  try {
    return fromUtf8(bytes);
  } catch {
    throw unreadable('This is neither a packet nor an export nor a record: its bytes are not text.');
  }
}

function unreadable(sentence: string): EvidenceError {
  return new EvidenceError('unreadable', sentence);
}
