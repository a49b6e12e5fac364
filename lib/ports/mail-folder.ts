import 'server-only';
import { randomBytes } from 'node:crypto';
import { mkdir, open, readdir, readFile, rename } from 'node:fs/promises';
import path from 'node:path';
import { env } from '@/lib/env';
import { readEml, type ReadMail } from './mail-eml';

const fileName = /^\d{8}T\d{9}Z-[0-9a-f]{8}\.eml$/;
export const mailFolder = () => path.join(env.dataFolder, 'mail');

/** Writes a caught mail so that it is either whole or absent. Returns its file name. */
export async function keepMail(message: Buffer, at: Date): Promise<string> {
  await mkdir(mailFolder(), { recursive: true, mode: 0o700 });
  const name = `${at.toISOString().replace(/[-:.]/g, '')}-${randomBytes(4).toString('hex')}.eml`;
  const temporary = path.join(mailFolder(), `.${name}.part`);
  // Mails hold links that act for their reader.
  const file = await open(temporary, 'wx', 0o600);
  try {
    await file.writeFile(message);
    await file.sync();
  } finally {
    await file.close();
  }
  await rename(temporary, path.join(mailFolder(), name));
  return name;
}

/** Names of the caught mails, the newest first. */
export async function mailNames(): Promise<string[]> {
  try {
    const names = await readdir(mailFolder());
    return names.filter((name) => fileName.test(name)).sort((a, b) => (a < b ? 1 : -1));
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ENOENT') return [];
    throw error;
  }
}

/** One caught mail, or null. A name that is not one we gave cannot reach another file. */
export async function readKeptMail(name: string): Promise<ReadMail | null> {
  if (!fileName.test(name)) return null;
  try {
    return readEml(await readFile(path.join(mailFolder(), name)));
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ENOENT') return null;
    throw error;
  }
}
