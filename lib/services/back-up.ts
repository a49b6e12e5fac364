import 'server-only';
import { cp, mkdir, open, readdir, rename, rm, stat } from 'node:fs/promises';
import path from 'node:path';
import { QueryTypes } from 'sequelize';
import { database } from '@/db/index';
import { env } from '@/lib/env';

/** Folders beside the database that belong to it. Caught mail is not part of a record. */
const folders = ['blobs', 'packets', 'imports', 'keys', 'checkpoints'] as const;
const databaseName = 'witnessmark.sqlite';

/**
 * Copies a running installation: first the database, through SQLite itself, so that every file it names is there when
 * the files follow. Files are named by their hash and never change, so only new ones are copied into an older backup.
 *
 * @returns how many files were copied
 */
export async function backUp(options: { to: string }): Promise<{ copied: number }> {
  const to = path.resolve(options.to);
  await mkdir(to, { recursive: true, mode: 0o700 });
  const fresh = path.join(to, `${databaseName}.new`);
  await rm(fresh, { force: true });
  await database().query('VACUUM INTO ?', { replacements: [fresh] });
  await sync(fresh);
  await rename(fresh, path.join(to, databaseName));
  let copied = 1;
  for (const folder of folders) copied += await copyNew(path.join(env.dataFolder, folder), path.join(to, folder));
  return { copied };
}

/**
 * Puts a backup into an empty data folder and asks SQLite whether it is sound. Throws, having written nothing, if the
 * data folder holds a database already.
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
  for (const folder of folders) copied += await copyNew(path.join(from, folder), path.join(env.dataFolder, folder));
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

async function copyNew(from: string, to: string): Promise<number> {
  if (!(await exists(from))) return 0;
  let copied = 0;
  await mkdir(to, { recursive: true, mode: 0o700 });
  for (const entry of await readdir(from, { withFileTypes: true })) {
    const [source, target] = [path.join(from, entry.name), path.join(to, entry.name)];
    if (entry.isDirectory()) {
      if (entry.name !== 'incoming') copied += await copyNew(source, target);
    } else if (!(await isSame(source, target))) {
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
