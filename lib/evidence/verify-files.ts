import type { Findings } from '@/lib/evidence/findings';
import type { BundleFile } from '@/lib/evidence/format';
import { sha256Hex } from '@/lib/evidence/hash';
import { isAttachments } from '@/lib/evidence/verify-parts';
import type { OpenedLog } from '@/lib/evidence/verify-references';

/** A file as it was found in a packet, an export or a folder. */
export interface GivenFile {
  name: string;
  bytes: Uint8Array;
  /** It came at the top of an export for people, as `companionNames` says: no entry has to name it. */
  isCompanion?: true;
}
/** What lies at the top of an export beside the record, for whoever finds it later. */
export const companionNames: readonly string[] = ['README.txt', 'verify.mjs', 'verify.html'];
type FileNote = Pick<BundleFile, 'sha256' | 'bytes' | 'mediaType'>;
/** A file as an opened part names it, and the words for the entry that holds the part. */
type SealedFile = FileNote & { where: string };

/**
 * Checks the listed files against the attachments and copies that opened parts name, and the given bytes against the
 * list.
 *
 * @param given undefined if no files came with the record: then only the list is checked
 * @example checkFiles(bundle.files, logs, [{ name: 'receipt.jpg', bytes }], findings);
 */
export function checkFiles(
  listed: BundleFile[],
  logs: OpenedLog[],
  given: GivenFile[] | undefined,
  findings: Findings,
): void {
  const sealed = sealedFiles(logs);
  for (const file of listed) checkListed(file, sealed, findings);
  if (given === undefined) {
    if (listed.length > 0)
      findings.notChecked.push('The pictures and papers themselves: none were given with the record.');
    return;
  }
  const byName = new Map(listed.map((file) => [file.name, file]));
  const companions = given.filter((file) => file.isCompanion === true && !byName.has(file.name));
  if (companions.length > 0) {
    const which = companions.map((file) => file.name).join(', ');
    findings.notChecked.push(
      `${which}: they come with the export and are no part of the record. To check it, use a program from elsewhere.`,
    );
  }
  const present = new Set<string>();
  for (const file of given) {
    if (companions.includes(file)) continue;
    const hash = sha256Hex(file.bytes);
    const named = byName.get(file.name);
    if (named !== undefined && named.sha256 !== hash) {
      const sentence = `The file “${file.name}” is not the one that was sealed.`;
      findings.alter('file-changed', {}, sentence, `SHA-256 ${hash}, listed ${named.sha256}`);
    } else if (named !== undefined && named.bytes !== file.bytes.length) {
      const sentence = `The file “${file.name}” does not have the length that was sealed.`;
      findings.alter('file-changed', {}, sentence, `${file.bytes.length} bytes, listed ${named.bytes}`);
    } else if (named === undefined && !listed.some((other) => other.sha256 === hash)) {
      const sentence = `The file “${file.name}” lies beside the record, and no entry of the record names it.`;
      findings.alter('file-unbound', {}, sentence, `SHA-256 ${hash} is not listed`);
    }
    present.add(hash);
  }
  // One that is here but changed has been named already.
  const names = new Set(given.map(({ name }) => name));
  const missing = listed.filter((file) => file.included && !present.has(file.sha256) && !names.has(file.name));
  if (missing.length > 0) {
    const first = missing.slice(0, 3).map((file) => `“${file.name}”`);
    const more = missing.length > first.length ? ` and ${missing.length - first.length} more` : '';
    findings.remark('file-missing', `Listed but not here: ${first.join(', ')}${more}.`, { count: missing.length });
  }
}

function checkListed(file: BundleFile, sealed: Map<string, SealedFile[]>, findings: Findings): void {
  const notes = sealed.get(file.sha256);
  if (file.derivedFrom !== null) {
    if (!sealed.has(file.derivedFrom)) {
      const sentence = `The file “${file.name}” is said to be a copy of something that no opened entry names.`;
      findings.alter('file-unbound', {}, sentence, `derivedFrom ${file.derivedFrom} is in no opened part`);
    } else {
      const made = `The file “${file.name}” was made later by the installation from the file with SHA-256 ${file.derivedFrom.slice(0, 16)}…`;
      const [note] = notes ?? [];
      const sentence = note === undefined ? `${made}; it was not sealed itself.` : `${made}; sealed in ${note.where}.`;
      findings.remark('copy-by-installation', sentence, { count: 1 });
    }
  }
  if (notes === undefined) {
    if (!file.included || file.derivedFrom !== null) return;
    const sentence = `The file “${file.name}” belongs to no opened entry of this record.`;
    findings.alter('file-unbound', {}, sentence, `SHA-256 ${file.sha256} is in no opened part`);
  } else if (!notes.some((note) => note.bytes === file.bytes && note.mediaType === file.mediaType)) {
    const sentence = `The file “${file.name}” is listed as something else than what was sealed.`;
    findings.alter(
      'file-changed',
      {},
      sentence,
      `${file.bytes} bytes of ${file.mediaType} differ from the opened part`,
    );
  }
}

function sealedFiles(logs: OpenedLog[]): Map<string, SealedFile[]> {
  const sealed = new Map<string, SealedFile[]>();
  const add = (file: FileNote, where: string) => {
    const note = { sha256: file.sha256, bytes: file.bytes, mediaType: file.mediaType, where };
    const notes = sealed.get(file.sha256);
    if (notes === undefined) sealed.set(file.sha256, [note]);
    else notes.push(note);
  };
  for (const { source, parts } of logs) {
    parts.forEach(({ opened }, seq) => {
      const attachments = opened.get('attachments');
      if (!isAttachments(attachments)) return;
      const where = source.subject === 'machine' ? `entry ${seq}` : `line ${seq} of the shelf’s log`;
      for (const attachment of attachments) {
        add(attachment, where);
        if (attachment.copy !== undefined) add(attachment.copy, where);
      }
    });
  }
  return sealed;
}
