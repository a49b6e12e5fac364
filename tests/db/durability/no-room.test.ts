import { execFileSync, spawnSync } from 'node:child_process';
import { cpSync, mkdtempSync, rmSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { closeDatabase, database } from '@/db/index';
import { env } from '@/lib/env';
import { openLog } from '@/lib/services/open-log';
import { stampingSettled } from '@/lib/services/stamp-checkpoints';
import { bundleChild } from '../../setup/child-process';
import { makePerson, useTestDatabase } from '../../setup/test-database';

// A file system of 4 MB that is really full, in a mount namespace of its own: the way of SQLite's out-of-disk tests
// (sqlite.org/testing.html, §3.1), with the kernel in the place of their simulated one.
const place = path.join(os.tmpdir(), `witnessmark-full-${process.pid}`);
const inNamespace = (command: string) => ['-Urm', 'sh', '-c', `mount -t tmpfs -o size=4m tmpfs ${place} && ${command}`];
const canMount = () => {
  execFileSync('mkdir', ['-p', place]);
  return spawnSync('unshare', inNamespace('true')).status === 0;
};

useTestDatabase();
let child = '';
let away = '';
beforeAll(async () => {
  child = await bundleChild('tests/db/durability/full-child.ts');
  away = mkdtempSync(path.join(os.tmpdir(), 'witnessmark-room-'));
});
afterAll(() => {
  rmSync(child, { force: true });
  rmSync(away, { recursive: true });
  rmSync(place, { recursive: true, force: true });
});

it(
  'a full disk refuses with its sentence, loses nothing, and goes on once there is room',
  { timeout: 60_000 },
  async ({ skip }) => {
    if (!canMount()) skip('This machine lets nobody mount a small file system of their own (unshare -Urm).');
    const { id: rider } = await makePerson();
    const body = { make: 'Corvane', model: 'Wren 300', kindOfMachine: 'motorcycle', recordStarts: { on: '2026-01-01', why: 'new' } } as const; // prettier-ignore
    const { log } = await openLog({ subject: 'machine', subjectId: crypto.randomUUID(), by: rider, parts: async () => ({ body }) }); // prettier-ignore
    await stampingSettled();
    await database().query('PRAGMA wal_checkpoint(TRUNCATE)');
    await closeDatabase();
    cpSync(env.dataFolder, away, { recursive: true });
    const run = `cp -a ${away}/. ${place} && exec ${process.execPath} --conditions=react-server ${child} ${rider} ${log}`;
    const { status, stdout, stderr } = spawnSync('unshare', inNamespace(run), {
      encoding: 'utf8',
      env: { ...process.env, WITNESSMARK_DATA: place },
    });
    expect([status, stderr]).toEqual([0, '']);
    const said = JSON.parse(stdout) as { acknowledged: number; fileRefused: string; sealRefused: string; after: number; problems: unknown[] }; // prettier-ignore
    expect(said.acknowledged).toBeGreaterThan(0);
    expect(said).toMatchObject({ fileRefused: 'storage-full', sealRefused: 'storage-full', problems: [] });
    // The lines are those that were acknowledged, the opening, and one sealed after room was made.
    expect(said.after).toBe(said.acknowledged + 2);
  },
);
