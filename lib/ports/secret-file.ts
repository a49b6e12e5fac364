import 'server-only';
import { randomUUID } from 'node:crypto';
import {
  closeSync,
  fsyncSync,
  linkSync,
  mkdirSync,
  openSync,
  readFileSync,
  renameSync,
  statSync,
  type Stats,
  unlinkSync,
  writeSync,
} from 'node:fs';
import path from 'node:path';

const ownerOnly = 0o600;
const anyOther = 0o077;

/**
 * Reads a file that only the server's own account may read; makes it with `make` when there is none.
 * Two processes that start at once end with the same file. Throws with a sentence if others may read it.
 */
export function readOrMakeSecretFile(file: string, make: () => string): string {
  for (;;) {
    const read = readSecretFile(file);
    if (read !== null) return read.text;
    makeSecretFile(file, make());
  }
}

/**
 * Reads a file that only the server's own account may read; null when there is none. `version` differs whenever another
 * file was put in its place. Throws with a sentence if others may read it, it is another account's, or it cannot be read.
 */
export function readSecretFile(file: string): { text: string; version: string } | null {
  const version = secretFileVersion(file);
  if (version === null) return null;
  try {
    return { text: readFileSync(file, 'utf8'), version };
  } catch (error) {
    throw unreadable(file, error);
  }
}

/** Asks of a file what `readSecretFile` does, without reading it: cheap enough for every seal. */
export function secretFileVersion(file: string): string | null {
  let found: Stats;
  try {
    found = statSync(file);
  } catch (error) {
    if (!isCode(error, 'ENOENT')) throw unreadable(file, error);
    return null;
  }
  if (!found.isFile()) throw unreadable(file);
  const account = process.geteuid?.();
  if (account !== undefined && found.uid !== account) {
    throw new Error(
      `The key file ${file} belongs to account ${found.uid}, and this server runs as ${account}. ` +
        'Whoever owns it could exchange it: make the server’s account its owner (chown).',
    );
  }
  if ((found.mode & anyOther) !== 0) {
    const shown = (found.mode & 0o777).toString(8).padStart(4, '0');
    throw new Error(
      `The key file ${file} has mode ${shown}, so other accounts could use it. ` +
        'Make it readable by its owner alone (chmod 600).',
    );
  }
  return [found.dev, found.ino, found.mtimeMs, found.ctimeMs, found.size].join(' ');
}

/** Makes the file for its owner alone, unless there is one: it never replaces what another process made meanwhile. */
export function makeSecretFile(file: string, text: string): void {
  const temporary = writeBeside(file, text);
  try {
    // A link, unlike a rename, never replaces the file that another process made meanwhile.
    linkSync(temporary, file);
  } catch (error) {
    if (!isCode(error, 'EEXIST')) throw error;
  } finally {
    unlinkSync(temporary);
  }
  syncFolder(path.dirname(file));
}

/** Puts a new file in the place of an old one at once: whoever reads gets the one or the other, never neither. */
export function replaceSecretFile(file: string, text: string): void {
  renameSync(writeBeside(file, text), file);
  syncFolder(path.dirname(file));
}

function writeBeside(file: string, text: string): string {
  mkdirSync(path.dirname(file), { recursive: true, mode: 0o700 });
  const temporary = `${file}.${randomUUID()}`;
  const descriptor = openSync(/* turbopackIgnore: true */ temporary, 'wx', ownerOnly);
  try {
    writeSync(descriptor, text);
    fsyncSync(descriptor);
  } finally {
    closeSync(descriptor);
  }
  return temporary;
}

function syncFolder(folder: string): void {
  const opened = openSync(folder, 'r');
  fsyncSync(opened);
  closeSync(opened);
}

function unreadable(file: string, cause?: unknown): Error {
  return new Error(`The key file ${file} cannot be read by this account. Check what it is and whose.`, { cause });
}

function isCode(error: unknown, code: string): boolean {
  return error instanceof Error && (error as NodeJS.ErrnoException).code === code;
}
