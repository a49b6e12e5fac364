import 'server-only';
import { randomBytes } from 'node:crypto';
import { closeSync, fsyncSync, linkSync, mkdirSync, openSync, readFileSync, unlinkSync, writeSync } from 'node:fs';
import path from 'node:path';
import { env } from '@/lib/env';

const known = new Map<string, string>();

/**
 * The secret that seals cookies: from the environment, or else made at the first start and kept beside the other keys,
 * readable by the installation's own user only.
 */
export function sessionKey(): string {
  if (env.secret !== undefined) return env.secret;
  const file = path.join(env.dataFolder, 'keys', 'session.key');
  let key = known.get(file);
  if (key === undefined) {
    key = readKey(file) ?? makeKey(file);
    known.set(file, key);
  }
  return key;
}

function readKey(file: string): string | undefined {
  try {
    const key = readFileSync(file, 'utf8').trim();
    if (key.length < 32) throw new Error(`${file} is damaged: it holds fewer than 32 characters.`);
    return key;
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ENOENT') return undefined;
    throw error;
  }
}

function makeKey(file: string): string {
  mkdirSync(path.dirname(file), { recursive: true, mode: 0o700 });
  const key = randomBytes(48).toString('base64url');
  const temporary = `${file}.${process.pid}.${randomBytes(4).toString('hex')}`;
  const descriptor = openSync(/* turbopackIgnore: true */ temporary, 'wx', 0o600);
  writeSync(descriptor, `${key}\n`);
  fsyncSync(descriptor);
  closeSync(descriptor);
  try {
    // A link, unlike a rename, fails if another process was first: both then use the one key.
    linkSync(temporary, file);
    return key;
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code !== 'EEXIST') throw error;
    return readKey(file)!;
  } finally {
    unlinkSync(temporary);
  }
}
