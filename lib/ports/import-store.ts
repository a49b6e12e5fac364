import 'server-only';
import { mkdir, open, readdir, readFile, rename, rm, stat, writeFile } from 'node:fs/promises';
import path from 'node:path';
import { env } from '@/lib/env';
import { asStorageError, type IncomingBlob } from '@/lib/ports/blob-store';

/**
 * Records brought in from elsewhere, each in a folder of its own under its id: the ZIP as it came, what was found when
 * it was checked, and pictures made from it. One that nobody decided about yet lies in `incoming`, which no backup
 * copies and which is swept.
 */
const root = () => path.join(env.dataFolder, 'imports');
const incoming = () => path.join(root(), 'incoming');
const pattern = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/;

export type ImportPlace = 'incoming' | 'kept';

function folderOf(id: string, place: ImportPlace): string {
  if (!pattern.test(id)) throw new Error(`not an id: ${id}`);
  return path.join(place === 'kept' ? root() : incoming(), id);
}

export const importZip = (id: string, place: ImportPlace): string => path.join(folderOf(id, place), 'export.zip');
const noteFile = (id: string, place: ImportPlace) => path.join(folderOf(id, place), 'found.json');

/** Puts a received file where it waits for a decision. */
export async function stageImport(id: string, blob: IncomingBlob): Promise<void> {
  await saving(async () => {
    await mkdir(folderOf(id, 'incoming'), { recursive: true, mode: 0o700 });
    await rename(blob.temporary, importZip(id, 'incoming'));
  });
}

/** What was found when it was checked, as JSON. Null if there is no such import. */
export async function readImportNote<Note>(id: string, place: ImportPlace): Promise<Note | null> {
  if (!pattern.test(id)) return null;
  const text = await readFile(noteFile(id, place), 'utf8').catch(() => null);
  return text === null ? null : (JSON.parse(text) as Note);
}

export async function writeImportNote(id: string, place: ImportPlace, note: object): Promise<void> {
  await saving(async () => {
    await mkdir(folderOf(id, place), { recursive: true, mode: 0o700 });
    await writeWhole(noteFile(id, place), Buffer.from(JSON.stringify(note)));
  });
}

/** From waiting to kept, all at once and for good: only then may a row name it. */
export async function keepStagedImport(id: string): Promise<void> {
  await saving(async () => {
    await rename(folderOf(id, 'incoming'), folderOf(id, 'kept'));
    await syncFolder(root());
  });
}

/** Removes an import with everything that was made from it. */
export async function dropImport(id: string, place: ImportPlace): Promise<void> {
  await rm(folderOf(id, place), { recursive: true, force: true });
}

/** A picture made from a file inside the ZIP; null if it was not made yet. */
export async function readImportPicture(id: string, name: string): Promise<Buffer | null> {
  return readFile(pictureFile(id, name)).catch(() => null);
}

export async function writeImportPicture(id: string, name: string, bytes: Buffer): Promise<void> {
  await saving(async () => {
    await mkdir(path.dirname(pictureFile(id, name)), { recursive: true, mode: 0o700 });
    await writeWhole(pictureFile(id, name), bytes);
  });
}

function pictureFile(id: string, name: string): string {
  if (!/^[0-9a-f]{64}\.(jpg|webp)$/.test(name)) throw new Error(`not a picture: ${name}`);
  return path.join(folderOf(id, 'kept'), 'pictures', name);
}

/** Ids of what waits for a decision, with when it came. */
export async function stagedImports(): Promise<{ id: string; sinceMs: number }[]> {
  const names = await readdir(incoming()).catch(() => []);
  const found = names.filter((name) => pattern.test(name)).map(async (id) => {
    const since = await stat(path.join(incoming(), id)).catch(() => null);
    return since === null ? [] : [{ id, sinceMs: since.mtimeMs }];
  });
  return (await Promise.all(found)).flat();
} // prettier-ignore

async function writeWhole(target: string, bytes: Buffer): Promise<void> {
  const temporary = `${target}.part`;
  await writeFile(temporary, bytes, { mode: 0o600, flush: true });
  await rename(temporary, target);
  await syncFolder(path.dirname(target));
}

async function syncFolder(folder: string): Promise<void> {
  const handle = await open(folder, 'r');
  await handle.sync();
  await handle.close();
}

async function saving<T>(work: () => Promise<T>): Promise<T> {
  try {
    return await work();
  } catch (error) {
    throw asStorageError(error);
  }
}
