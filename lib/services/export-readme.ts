import 'server-only';
import { whatIsShown } from '@/lib/evidence/format';
import { fingerprint, parseVerifierKey } from '@/lib/evidence/checkpoint';
import type { Bundle, BundleFile } from '@/lib/evidence/format';
import type { ExportFiles } from '@/lib/services/export-files';
import { readmeFormat } from '@/lib/services/export-readme-format';

export interface ReadmeOptions {
  bundle: Bundle;
  which: ExportFiles;
  /** Named in the record, and not to be found on the server when this was made. */
  missing: BundleFile[];
  hasPage: boolean;
  /** A log in it was sealed under a clock that somebody set: it is a demo. */
  areTimesInjected: boolean;
}

/** README.txt of an export: for somebody in fifty years who has nothing but the ZIP. The same bundle, the same text. */
export function exportReadme({ bundle, which, missing, hasPage, areTimesInjected }: ReadmeOptions): string {
  const [machine, ...shelves] = bundle.logs;
  const [key = ''] = bundle.verifierKeys;
  const files = bundle.files.filter(({ included }) => included);
  const lines = [
    'A RECORD OF MAINTENANCE, WITH PROOF',
    '===================================',
    '',
    ...wrap(
      'This ZIP file holds the maintenance record of one machine: every service, with what was used, the receipts, and the pictures, as its owner sealed it. It was kept with a program called Witnessmark. You do not need that program to read or to check it.',
    ),
    '',
    ...(areTimesInjected
      ? [...wrap('DEMO, TIMES INJECTED. The record was made up to show the program: its times are not the ones at which it was sealed, and nothing in it happened.'), '']
      : []),
    `Number of this file   ${bundle.number}`,
    `Made                  ${bundle.madeAt} (UTC)`,
    `Entries               ${machine?.entries.length ?? 0} of the machine${shelves.length === 0 ? '' : `, ${shelves.reduce((sum, { entries }) => sum + entries.length, 0)} of ${shelves.length === 1 ? 'the shelf' : `${shelves.length} shelves`} its receipts are on`}`,
    `Origin                ${machine?.origin ?? ''}`,
    `Log                   ${machine?.id ?? ''}`,
    `Files beside it       ${files.length}`,
    '',
    'WHAT IS WHAT',
    '============',
    '',
    ...item('record.json', 'the record itself. Only this counts. It is text, and any editor opens it; what an entry says stands in its "parts", in base64url, as described below.'),
    ...item('originals/', which === 'originals'
      ? 'the pictures and papers exactly as they were received, byte for byte. They may show places, names and prices.'
      : 'only papers that have no shared copy. This export was asked for without original pictures; record.json names them, with their hashes.'),
    ...item('copies/', 'the shared copies of the pictures: smaller, upright, without location or camera data. Each was made before sealing and is named in its entry beside its original.'),
    ...item('README.txt', 'this text. It is not part of the record, and nothing in it is sealed.'),
    ...item('verify.mjs', 'a program that checks all of this. It needs Node (version 20 or later), nothing else and no network.'),
    ...(hasPage ? item('verify.html', 'the same check as a page: open it in a browser, from the disk, and give it this ZIP file.') : []),
    '',
    ...wrap('A file is called by the number of its entry, its own number in that entry, what it shows, and the beginning of its SHA-256. "receipt-5-1-receipt-front" is a receipt on line 5 of the shelf.'),
    '',
    ...missingLines(missing),
    'HOW TO CHECK IT',
    '===============',
    '',
    `  node verify.mjs ${exportName(bundle)}.zip --key KEY`,
    '',
    ...wrap('It answers "unchanged", "altered" and by what, or "unreadable". The ZIP file must be as it was made; unpacked, it is checked with'),
    '',
    '  node verify.mjs record.json --files . --key KEY',
    '',
    ...wrap('A program or page that comes with a file can have been changed with it. If much depends on it, take one from elsewhere, or write one: all that is needed is said below.'),
    '',
    ...wrap('KEY is the key of the installation that kept the record. Anybody can make a file like this one with a key of their own: get the key, or its fingerprint, from somewhere else than this file, such as an old mail about the record, a printed packet, or the people who kept it. According to this file it is'),
    '',
    `  ${key}`,
    '',
    '  fingerprint (SHA-256 of the public key)',
    ...fingerprintLines(key),
    '',
    'WHAT IT SHOWS, AND WHAT IT DOES NOT',
    '===================================',
    '',
    ...wrap(whatIsShown),
    '',
    ...wrap('"Complete" means: as of the checkpoint in this file. Three times are kept apart: claimed (when the work was done, as its author says), sealed (when the installation took the entry) and proven (no later than an independent time stamp). Nothing here is legal advice.'),
    '',
    readmeFormat,
  ]; // prettier-ignore
  return lines.join('\n');
}

/** The name of an export without its ending; no VIN, since the name shows wherever the file goes. */
export function exportName({ number, madeAt }: Pick<Bundle, 'number' | 'madeAt'>): string {
  return `witnessmark-${number}-${madeAt.slice(0, 10)}`;
}

function missingLines(missing: BundleFile[]): string[] {
  if (missing.length === 0) return [];
  return [
    'WHAT IS MISSING',
    '===============',
    '',
    ...wrap('The record names these files, and they were not on the server when this export was made:'),
    '',
    ...missing.map(({ sha256, mediaType, bytes }) => `  ${sha256}\n    ${mediaType}, ${bytes} bytes`),
    '',
  ];
}

function fingerprintLines(key: string): string[] {
  try {
    return wrap(fingerprint(parseVerifierKey(key).publicKey), '  ', 42);
  } catch {
    return ['  (the key cannot be read)'];
  }
}

const item = (name: string, words: string): string[] => {
  const [first = '', ...rest] = wrap(words, '              ', 76);
  return [`${name.padEnd(14)}${first.trimStart()}`, ...rest];
};

function wrap(text: string, indent = '', width = 76): string[] {
  const lines: string[] = [];
  let line = indent;
  for (const word of text.split(/\s+/)) {
    const longer = line === indent ? indent + word : `${line} ${word}`;
    if (longer.length > width && line !== indent) {
      lines.push(line);
      line = indent + word;
    } else line = longer;
  }
  return [...lines, line];
}
