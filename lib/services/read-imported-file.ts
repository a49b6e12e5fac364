import 'server-only';
import { createReadStream } from 'node:fs';
import { stat } from 'node:fs/promises';
import type { PersonRow } from '@/db/queries/people';
import { findImport } from '@/db/queries/imports';
import { authorise } from '@/lib/auth/guard';
import { WitnessmarkError, notFound } from '@/lib/errors';
import type { BundleFile } from '@/lib/evidence/format';
import { sha256Hex } from '@/lib/evidence/hash';
import { importZip, readImportPicture, writeImportPicture } from '@/lib/ports/import-store';
import { readPicture, sniff } from '@/lib/ports/image';
import { filesInImport } from '@/lib/services/read-imported';
import { exportName } from '@/lib/services/export-readme';
import { readFromZip } from '@/lib/services/zip-file';

/** As large as a picture that is sent in may be. */
const largestPictureBytes = 40_000_000;

export interface ImportedPicture {
  body: Uint8Array<ArrayBuffer>;
  headers: Record<string, string>;
}

/**
 * A picture out of an imported record: decoded and made anew here, whatever the file says it is. What came in the ZIP
 * itself is never shown, only handed over with the ZIP.
 */
export async function readImportedPicture(options: {
  person: PersonRow;
  id: string;
  sha256: string;
  kind: 'thumb' | 'plate';
}): Promise<ImportedPicture> {
  const { person, id, sha256, kind } = options;
  await authorise({ person, action: 'hold-import', import: id });
  const name = `${sha256}.${kind === 'thumb' ? 'webp' : 'jpg'}`;
  const bytes = (await readImportPicture(id, name)) ?? (await makePictures(id, sha256))[kind];
  return {
    body: new Uint8Array(bytes),
    headers: {
      'Content-Type': kind === 'thumb' ? 'image/webp' : 'image/jpeg',
      'Content-Length': String(bytes.length),
      'Content-Disposition': 'inline',
      'Content-Security-Policy': "sandbox; default-src 'none'",
      'X-Content-Type-Options': 'nosniff',
      'Cache-Control': 'private, no-store',
      'Cross-Origin-Resource-Policy': 'same-origin',
    },
  };
}

async function makePictures(id: string, sha256: string): Promise<{ thumb: Buffer; plate: Buffer }> {
  const file = (await remembered(id)).get(sha256);
  if (file === undefined || file.bytes > largestPictureBytes) throw notFound('picture');
  const bytes = await readFromZip(importZip(id, 'kept'), (zip) => zip.read(file.name));
  const type = bytes === null ? null : sniff(bytes);
  if (bytes === null || sha256Hex(bytes) !== sha256 || type === null || type === 'application/pdf') {
    throw notFound('picture');
  }
  let made: Awaited<ReturnType<typeof readPicture>>;
  try {
    made = await readPicture(bytes, type);
  } catch (error) {
    throw new WitnessmarkError('not-found', 'This picture cannot be shown: it does not decode.', { cause: error });
  }
  await writeImportPicture(id, `${sha256}.jpg`, made.copy);
  await writeImportPicture(id, `${sha256}.webp`, made.thumb);
  return { thumb: made.thumb, plate: made.copy };
}

/** One page asks for many pictures at once; the record is not read anew for each. An import never changes. */
const files = new Map<string, Promise<Map<string, BundleFile>>>();
const mostRemembered = 5;

function remembered(id: string): Promise<Map<string, BundleFile>> {
  const known = files.get(id);
  if (known !== undefined) return known;
  if (files.size >= mostRemembered) files.clear();
  const read = filesInImport(id);
  files.set(id, read);
  read.catch(() => files.delete(id));
  return read;
}

/** The ZIP as it came. */
export async function openImportedFile({ person, id }: { person: PersonRow; id: string }) {
  await authorise({ person, action: 'hold-import', import: id });
  const row = await findImport(id);
  const file = importZip(id, 'kept');
  const size = await stat(file).then(
    (found) => found.size,
    () => null,
  );
  if (row === null || size === null) throw new WitnessmarkError('gone', 'The file of this record is gone.');
  return { bytes: size, name: fileName(row), body: piecesOf(file) };
}

/** Number and date stand in the file, and somebody else wrote it: only plain characters go into a header. */
function fileName(row: { number: string; madeAt: string }): string {
  return `${exportName(row).replace(/[^A-Za-z0-9-]/g, '').slice(0, 80)}.zip`;
} // prettier-ignore

async function* piecesOf(file: string): AsyncGenerator<Uint8Array, void, void> {
  for await (const piece of createReadStream(file)) yield piece as Uint8Array;
}
