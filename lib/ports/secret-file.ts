import 'server-only';
import { randomUUID } from 'node:crypto';
import {
  closeSync,
  fsyncSync,
  linkSync,
  mkdirSync,
  openSync,
  readFileSync,
  statSync,
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
    let mode: number;
    try {
      mode = statSync(file).mode;
    } catch (error) {
      if (!isCode(error, 'ENOENT')) throw unreadable(file, error);
      makeFile(file, make());
      continue;
    }
    if ((mode & anyOther) !== 0) {
      const shown = (mode & 0o777).toString(8).padStart(4, '0');
      throw new Error(
        `The key file ${file} has mode ${shown}, so other accounts could use it. ` +
          `Make it readable by its owner alone (chmod 600), then start again.`,
      );
    }
    try {
      return readFileSync(file, 'utf8');
    } catch (error) {
      throw unreadable(file, error);
    }
  }
}

function makeFile(file: string, text: string): void {
  const folder = path.dirname(file);
  mkdirSync(folder, { recursive: true, mode: 0o700 });
  const temporary = `${file}.${randomUUID()}`;
  const descriptor = openSync(/* turbopackIgnore: true */ temporary, 'wx', ownerOnly);
  try {
    writeSync(descriptor, text);
    fsyncSync(descriptor);
  } finally {
    closeSync(descriptor);
  }
  try {
    // A link, unlike a rename, never replaces the file that another process made meanwhile.
    linkSync(temporary, file);
  } catch (error) {
    if (!isCode(error, 'EEXIST')) throw error;
  } finally {
    unlinkSync(temporary);
  }
  const opened = openSync(folder, 'r');
  fsyncSync(opened);
  closeSync(opened);
}

function unreadable(file: string, cause: unknown): Error {
  return new Error(`The key file ${file} cannot be read by this account. Check its owner, then start again.`, {
    cause,
  });
}

function isCode(error: unknown, code: string): boolean {
  return error instanceof Error && (error as NodeJS.ErrnoException).code === code;
}
