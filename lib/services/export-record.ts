import 'server-only';
import { randomInt } from 'node:crypto';
import { readStoredLogs } from '@/db/queries/entries';
import type { PersonRow } from '@/db/queries/people';
import type { Scope } from '@/lib/domain/scope';
import { authorise } from '@/lib/auth/guard';
import { WitnessmarkError } from '@/lib/errors';
import { utf8 } from '@/lib/evidence/bytes';
import type { Bundle, BundleFile } from '@/lib/evidence/format';
import { maxZipBytes, maxZipEntries } from '@/lib/evidence/zip-directory';
import { blobStore } from '@/lib/ports/blob-store';
import { bundleRecord } from '@/lib/services/bundle-record';
import { type ExportFiles, nameExportFiles } from '@/lib/services/export-files';
import { exportName, exportReadme } from '@/lib/services/export-readme';
import { readVerifier } from '@/lib/services/read-verifier';
import { writeZip, zipLength, type ZipSource } from '@/lib/services/write-zip';

export interface ExportOptions {
  person: PersonRow;
  machineId: string;
  files: ExportFiles;
}
export interface Export {
  /** With its ending. */
  name: string;
  /** To the byte. */
  bytes: number;
  /** The ZIP, piece by piece; nothing is read before it is asked for. */
  body: AsyncGenerator<Uint8Array, void, void>;
}

/** It is the owner's own: nothing is kept back, prices neither. */
const wholeScope: Scope = { closed: [] };
const mostReadings = 5;

/**
 * The whole record as a ZIP: `record.json`, the files beside it, a text that explains them, and the check. Throws
 * `too-large` if it would be larger than any checker reads.
 */
export async function exportRecord({ person, machineId, files }: ExportOptions): Promise<Export> {
  await authorise({ person, action: 'export', machine: machineId });
  const { sources, bundle } = await gather(machineId, files);
  const bytes = zipLength(sources);
  if (bytes > maxZipBytes || sources.length > maxZipEntries) throw tooLarge(bytes, files);
  return { name: `${exportName(bundle)}.zip`, bytes, body: writeZip(sources, new Date(bundle.madeAt)) };
}

export interface ExportSize {
  bytes: number;
  /** Named in the record and not on this server any more. */
  missing: number;
  isTooLarge: boolean;
}

/** How large the export would be now, for the button that asks for it. */
export async function readExportSize({ person, machineId, files }: ExportOptions): Promise<ExportSize> {
  await authorise({ person, action: 'export', machine: machineId });
  const { sources, missing } = await gather(machineId, files);
  const bytes = zipLength(sources);
  return { bytes, missing: missing.length, isTooLarge: bytes > maxZipBytes || sources.length > maxZipEntries };
}

function tooLarge(bytes: number, files: ExportFiles): WitnessmarkError {
  const instead =
    files === 'originals'
      ? 'Export it without the originals.'
      : 'Tell the steward: the data folder holds everything, and a backup copies it.';
  return new WitnessmarkError(
    'too-large',
    `This export would be ${(bytes / 1e9).toFixed(1)} GB, and no checker reads more than ${maxZipBytes / 1e9} GB. ${instead}`,
  );
}

interface Gathered {
  bundle: Bundle;
  sources: ZipSource[];
  missing: BundleFile[];
}

/** Which files there are is known from the record, and the record lists which are there: so it is read twice. */
async function gather(machineId: string, which: ExportFiles): Promise<Gathered> {
  const asked = { machineId, purpose: 'export', number: newNumber(), scope: wholeScope };
  for (let reading = 0; reading < mostReadings; reading += 1) {
    const first = (await bundleRecord(asked)).bundle;
    const names = nameExportFiles(first, which);
    const included = new Map<string, string>();
    const missing: BundleFile[] = [];
    for (const file of first.files) {
      const name = names.get(file.sha256);
      if (name === undefined) continue;
      if (await isStored(file)) included.set(file.sha256, name);
      else missing.push(file);
    }
    const { text, bundle } = await bundleRecord({ ...asked, included });
    if (sizeOf(bundle) !== sizeOf(first)) continue;
    const logs = await readStoredLogs(bundle.logs.map(({ id }) => id));
    const areTimesInjected = logs.some(({ log }) => log.timesInjected);
    return { bundle, missing, sources: await sourcesOf({ bundle, text, which, missing, areTimesInjected }) };
  }
  throw new WitnessmarkError('conflict', 'The record kept growing while it was read. Ask for the export again.');
}

const sizeOf = ({ logs }: Bundle) => logs.map(({ id, entries }) => `${id} ${entries.length}`).join();

/** A file of another length is not the one that was sealed. */
async function isStored({ sha256, bytes }: BundleFile): Promise<boolean> {
  return (await blobStore.has(sha256)) && (await blobStore.size(sha256)) === bytes;
}

async function sourcesOf(of: {
  bundle: Bundle;
  text: string;
  which: ExportFiles;
  missing: BundleFile[];
  areTimesInjected: boolean;
}): Promise<ZipSource[]> {
  const { bundle, text, which, missing, areTimesInjected } = of;
  const page = await readPage();
  const readme = exportReadme({ bundle, which, missing, hasPage: page !== null, areTimesInjected });
  const files = bundle.files
    .filter(({ included }) => included)
    .map(({ sha256, name, bytes }) => ({ name, bytes, open: () => blobStore.open(sha256) }));
  return [
    held('README.txt', utf8(readme)),
    held('record.json', utf8(text)),
    ...files.sort((a, b) => (a.name < b.name ? -1 : 1)),
    held('verify.mjs', (await readVerifier('verify.mjs')).bytes),
    ...(page === null ? [] : [held('verify.html', page)]),
  ];
}

function held(name: string, bytes: Uint8Array): ZipSource {
  return { name, bytes: bytes.length, open: () => [bytes] };
}

/** An installation that was built without the page exports without it. */
async function readPage(): Promise<Uint8Array | null> {
  return readVerifier('verify.html').then(
    ({ bytes }) => bytes,
    () => null,
  );
}

/** Without I, L, O, U, 0 and 1: a number is read out on the telephone. */
const numberAlphabet = '23456789ABCDEFGHJKMNPQRSTVWXYZ';
function newNumber(): string {
  const four = () => Array.from({ length: 4 }, () => numberAlphabet.charAt(randomInt(numberAlphabet.length))).join('');
  return `WX-${four()}-${four()}`;
}
