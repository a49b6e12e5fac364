import { demandZip } from '@/lib/evidence/zip-refusal';
import { fromUtf8 } from '@/lib/evidence/bytes';
import { isAcceptableText } from '@/lib/evidence/text';

const longestName = 255;

/**
 * The name of a file in a ZIP, from its bytes: a plain relative path that is the same file on every system.
 *
 * @throws EvidenceError `unreadable`
 * @example zipName(utf8('originals/12-1-odometer.jpg'), true); // 'originals/12-1-odometer.jpg'
 */
export function zipName(bytes: Uint8Array, isUtf8: boolean): string {
  demandZip(bytes.length > 0 && bytes.length <= longestName, 'a file in it has no name, or one that is too long');
  // Without the mark for UTF-8 another program may read another name.
  demandZip(isUtf8 || bytes.every((byte) => byte < 0x80), 'a file name in it is not written in UTF-8');
  let name: string;
  try {
    name = fromUtf8(bytes);
  } catch {
    name = '';
  }
  const isPlain = name !== '' && isAcceptableText(name) && !/[\n\t\\:]/.test(name);
  demandZip(isPlain, 'a file name in it has a character that no file name here may have');
  const steps = name.replace(/\/$/, '').split('/');
  // Windows drops a dot or a space at the end of a name, so that two names would be one file.
  const isRelative = steps.every((step) => step !== '' && step !== '.' && step !== '..' && !/[. ]$/.test(step));
  demandZip(isRelative, `“${name}” in it is no plain path below the folder it is unpacked in`);
  return name;
}

/**
 * Refuses names that are one file on a system that takes capitals and small letters for the same, and a file that is
 * also a folder.
 *
 * @throws EvidenceError `unreadable`
 * @example demandDistinct(['copies/a.jpg', 'COPIES/A.JPG']); // throws
 */
export function demandDistinct(names: string[]): void {
  const folded = names.map((name) => foldedName(name.replace(/\/$/, '')));
  const seen = new Set<string>();
  for (const name of folded) {
    demandZip(!seen.has(name), `it holds “${name}” twice, so it does not say which one counts`);
    seen.add(name);
  }
  const files = new Set(folded.filter((_, index) => names[index]?.endsWith('/') === false));
  for (const name of folded) {
    for (let at = name.indexOf('/'); at >= 0; at = name.indexOf('/', at + 1)) {
      demandZip(!files.has(name.slice(0, at)), `“${name.slice(0, at)}” in it is a file and a folder at once`);
    }
  }
}

/**
 * A name as a system compares it that takes capitals and small letters, and the forms of one character, for the same.
 *
 * @example foldedName('RECORD.JSON'); // 'record.json'
 */
export function foldedName(name: string): string {
  return name.normalize('NFKC').toUpperCase().toLowerCase().normalize('NFC');
}
