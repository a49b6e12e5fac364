import { cpSync, existsSync, mkdtempSync, renameSync, rmSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { closeDatabase, prepareDatabase } from '@/db/index';
import { env } from '@/lib/env';
import { backUp, restore } from '@/lib/services/back-up';
import { checkRecords } from '@/lib/services/check-records';
import { readStore } from '@/lib/services/read-store';
import { publishedKeys } from '@/lib/services/log-keys';
import { noticeRollbacks } from '@/lib/services/notice-rollback';
import { rotateKey } from '@/lib/services/rotate-key';
import { stampingSettled } from '@/lib/services/stamp-checkpoints';
import { sealRecord } from '../../setup/sealed-record';
import { makePerson, useTestDatabase } from '../../setup/test-database';

// The method is the Go checksum database's, whose client is shown an older and a forked tree. Here the installation is
// shown its own database of yesterday.
useTestDatabase();

const backups = mkdtempSync(path.join(os.tmpdir(), 'witnessmark-backups-'));
afterAll(() => rmSync(backups, { recursive: true, force: true }));

const database = path.join(env.dataFolder, 'witnessmark.sqlite');
const reading = (value: string) => ({ body: { odometer: { value, unit: '[mi_i]', instrument: 0 } } });

/** Only the database, as somebody would who finds it broken and knows of nothing else. */
async function putDatabaseBack(from: string): Promise<void> {
  await stampingSettled();
  await closeDatabase();
  for (const suffix of ['', '-wal', '-shm']) rmSync(database + suffix, { force: true });
  cpSync(path.join(from, 'witnessmark.sqlite'), database);
  await prepareDatabase();
}

describe('yesterday’s database', () => {
  it('put back is refused, named to the steward with both notes, and repaired by the newest backup', async () => {
    const steward = await makePerson({ isSteward: true });
    const { machine, machineId, seal } = await sealRecord();
    await stampingSettled();
    const [yesterday, newest] = [path.join(backups, 'yesterday'), path.join(backups, 'newest')];
    await backUp({ to: yesterday });
    await seal(machine.log, 'reading', reading('18300'));
    await stampingSettled();
    await backUp({ to: newest });

    await putDatabaseBack(yesterday);
    const sentence = `the database holds 3 entries of log ${machine.log}, but 4 were given out`;
    await expect(seal(machine.log, 'reading', reading('18400'))).rejects.toThrow(sentence);
    const { rollbacks, keyTrouble } = await readStore({ person: steward });
    expect(keyTrouble).toBeNull();
    expect(rollbacks).toEqual([
      {
        log: machine.log,
        name: null,
        subject: { kind: 'machine', id: machineId },
        issued: { size: 4, note: expect.stringContaining(`${machine.log}\n4\n`) as string },
        stored: { size: 3, note: expect.stringContaining(`${machine.log}\n3\n`) as string },
        sentence: expect.stringContaining(sentence) as string,
      },
    ]);
    const { problems } = await checkRecords();
    expect(problems.map((problem) => problem.sentence)).toContain(
      'The database does not hold what was given out: 4 entries of this log.',
    );

    await closeDatabase();
    const away = `${env.dataFolder}.away`;
    renameSync(env.dataFolder, away);
    expect(existsSync(database)).toBe(false);
    const { entries } = await restore({ from: newest });
    rmSync(away, { recursive: true });
    expect(entries).toBe(7);
    expect((await readStore({ person: steward })).rollbacks).toEqual([]);
    expect((await seal(machine.log, 'reading', reading('18400'))).seq).toBe(4);
  });

  it('restored beside newer keys and what was given out since leaves both: it is still refused', async () => {
    const { machine, seal } = await sealRecord();
    await stampingSettled();
    const older = path.join(backups, 'older');
    await backUp({ to: older });
    const { verifierKey } = await rotateKey();
    await seal(machine.log, 'reading', reading('18300'));
    await stampingSettled();
    await closeDatabase();
    for (const suffix of ['', '-wal', '-shm']) rmSync(database + suffix, { force: true });
    await restore({ from: older });
    expect(publishedKeys()[0]?.verifierKey).toBe(verifierKey);
    await expect(seal(machine.log, 'reading', reading('18400'))).rejects.toMatchObject({ code: 'rolled-back' });
  });

  it('is not seen in a backup that was taken while entries were sealed', async () => {
    const { machine, seal } = await sealRecord();
    await stampingSettled();
    let isDone = false;
    const sealing = (async () => {
      while (!isDone) await seal(machine.log, 'reading', reading('18300'));
    })();
    const busy = path.join(backups, 'busy');
    await backUp({ to: busy });
    isDone = true;
    await sealing;
    await stampingSettled();
    await closeDatabase();
    for (const name of ['witnessmark.sqlite', 'witnessmark.sqlite-wal', 'witnessmark.sqlite-shm', 'checkpoints']) {
      rmSync(path.join(env.dataFolder, name), { recursive: true, force: true });
    }
    await restore({ from: busy });
    // The log of the test before this one is still rolled back.
    expect((await noticeRollbacks()).map(({ log }) => log)).not.toContain(machine.log);
  });
});
