import 'server-only';
import { cp, mkdir, open, readdir, readFile, rename, rm, stat } from 'node:fs/promises';
import path from 'node:path';
import { QueryTypes } from 'sequelize';
import { database } from '@/db/index';
import { env } from '@/lib/env';
import { rememberIssued } from '@/lib/ports/issued-checkpoints';
import { publish } from '@/lib/services/log-keys';

/** What the database names is copied after it. Caught mail is not part of a record. */
const folders = ['blobs', 'packets', 'imports', 'keys'] as const;
/**
 * What was given out is copied before it: an entry sealed in between would otherwise make the backup look, once restored,
 * as if its database were older than what was given out.
 */
const givenOut = 'checkpoints';
const databaseName = 'witnessmark.sqlite';

/**
 * Copies a running installation: the database through SQLite itself, and every file it names after it, so that none is
 * missing. Files are named by their hash and never change, so only new ones are copied into an older backup.
 *
 * @returns how many files were copied
 */
export async function backUp(options: { to: string }): Promise<{ copied: number }> {
  const to = path.resolve(options.to);
  await mkdir(to, { recursive: true, mode: 0o700 });
  let copied = 1 + (await copyNew(path.join(env.dataFolder, givenOut), path.join(to, givenOut)));
  const fresh = path.join(to, `${databaseName}.new`);
  await rm(fresh, { force: true });
  await database().query('VACUUM INTO ?', { replacements: [fresh] });
  await sync(fresh);
  await rename(fresh, path.join(to, databaseName));
  for (const folder of folders) copied += await copyNew(path.join(env.dataFolder, folder), path.join(to, folder));
  return { copied };
}

/**
 * Puts a backup into a data folder without a database and asks SQLite whether it is sound. Throws, having written
 * nothing, if there is a database already. Keys that are there, and what was given out since the backup, stay: they are
 * newer than it.
 */
export async function restore(options: { from: string }): Promise<{ copied: number; entries: number }> {
  const from = path.resolve(options.from);
  const target = path.join(env.dataFolder, databaseName);
  if (await exists(target)) {
    throw new Error(`${env.dataFolder} holds a database already. Move it away first; nothing was restored.`);
  }
  if (!(await exists(path.join(from, databaseName)))) throw new Error(`There is no ${databaseName} in ${from}.`);
  await mkdir(env.dataFolder, { recursive: true, mode: 0o700 });
  let copied = 1;
  for (const folder of folders) {
    const isKept = folder === 'keys';
    copied += await copyNew(path.join(from, folder), path.join(env.dataFolder, folder), { isKept });
  }
  for (const key of await linesOf(path.join(from, 'keys', 'verifier-keys.txt'))) publish(key);
  for (const name of await readdir(path.join(from, givenOut)).catch(() => [])) {
    await rememberIssued(await readFile(path.join(from, givenOut, name), 'utf8'));
    copied += 1;
  }
  await cp(path.join(from, databaseName), target, { preserveTimestamps: true });
  await sync(target);
  const [check] = await database().query<{ integrity_check: string }>('PRAGMA integrity_check', {
    type: QueryTypes.SELECT,
  });
  if (check?.integrity_check !== 'ok') throw new Error(`The restored database is damaged: ${check?.integrity_check}`);
  const [count] = await database().query<{ entries: number }>('SELECT COUNT(*) AS entries FROM entries', {
    type: QueryTypes.SELECT,
  });
  return { copied, entries: count?.entries ?? 0 };
}

/** `isKept`: what is there already stays as it is. */
async function copyNew(from: string, to: string, { isKept = false } = {}): Promise<number> {
  if (!(await exists(from))) return 0;
  let copied = 0;
  await mkdir(to, { recursive: true, mode: 0o700 });
  for (const entry of await readdir(from, { withFileTypes: true })) {
    const [source, target] = [path.join(from, entry.name), path.join(to, entry.name)];
    if (entry.isDirectory()) {
      if (entry.name !== 'incoming') copied += await copyNew(source, target, { isKept });
    } else if (!(isKept ? await exists(target) : await isSame(source, target))) {
      await cp(source, `${target}.new`, { preserveTimestamps: true });
      await sync(`${target}.new`);
      await rename(`${target}.new`, target);
      copied += 1;
    }
  }
  return copied;
}

async function isSame(source: string, target: string): Promise<boolean> {
  if (!(await exists(target))) return false;
  const [a, b] = await Promise.all([stat(source), stat(target)]);
  return a.size === b.size && Math.abs(a.mtimeMs - b.mtimeMs) < 1000;
}

async function linesOf(file: string): Promise<string[]> {
  return (await readFile(file, 'utf8').catch(() => '')).split('\n').filter((line) => line !== '');
}

async function sync(file: string): Promise<void> {
  const handle = await open(file, 'r');
  await handle.sync();
  await handle.close();
}

const exists = (file: string) =>
  stat(file).then(
    () => true,
    () => false,
  );
