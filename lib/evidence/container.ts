import { fromUtf8 } from '@/lib/evidence/bytes';
import { maxBundleCharacters } from '@/lib/evidence/bundle';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import { attachmentsOf } from '@/lib/evidence/pdf-attachments';
import { parseSingleRevision, startsLikePdf } from '@/lib/evidence/pdf-revision';
import type { GivenFile } from '@/lib/evidence/verify-files';

const recordName = 'record.json';
/** UTF-8 takes up to three bytes for one UTF-16 character. */
const maxRecordBytes = maxBundleCharacters * 3;

/** What came out of a packet or a bare record. */
export interface Container {
  kind: 'packet' | 'record';
  bundleText: string;
  /** Undefined for a bare record: nothing lies beside it. */
  files: GivenFile[] | undefined;
}

/**
 * Takes the record out of whatever file a reader was given: a packet or a bare `record.json`.
 *
 * @throws EvidenceError `unreadable`, with a sentence that says why
 * @example (await readContainer(bytes)).kind; // 'packet'
 */
export async function readContainer(bytes: Uint8Array): Promise<Container> {
  if (startsLikePdf(bytes)) return { kind: 'packet', ...(await extractFromPacket(bytes)) };
  if (bytes[0] === 0x50 && bytes[1] === 0x4b) {
    throw unreadable('This is a ZIP file. Unpack it, then check the record.json or the packet inside it.');
  }
  if (bytes.length > maxRecordBytes) throw unreadable('This file is larger than any record.');
  return { kind: 'record', bundleText: recordText(bytes), files: undefined };
}

/**
 * Takes the record and the other attachments out of a packet: a PDF of exactly one revision with exactly one
 * `record.json`, counted over every file that anything in it names.
 *
 * @throws EvidenceError `unreadable`, with a sentence that says why
 * @example (await extractFromPacket(bytes)).files.map((file) => file.name); // ['receipt-front.jpg']
 */
export async function extractFromPacket(bytes: Uint8Array): Promise<{ bundleText: string; files: GivenFile[] }> {
  let attachments: GivenFile[];
  try {
    attachments = attachmentsOf(await parseSingleRevision(bytes), maxRecordBytes);
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
  return { bundleText: recordText(record.bytes), files: attachments.filter((file) => file !== record) };
}

function recordText(bytes: Uint8Array): string {
  try {
    return fromUtf8(bytes);
  } catch {
    throw unreadable('This is neither a packet nor a record: its bytes are not text.');
  }
}

function unreadable(sentence: string): EvidenceError {
  return new EvidenceError('unreadable', sentence);
}
