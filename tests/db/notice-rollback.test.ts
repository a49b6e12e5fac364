import { copyFileSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import { closeDatabase, database, databaseFile, prepareDatabase } from '@/db/index';
import { env } from '@/lib/env';
import { lastCheckpoint } from '@/db/queries/logs';
import { issuedCheckpoint, rememberIssued } from '@/lib/ports/issued-checkpoints';
import { noticeRollbacks } from '@/lib/services/notice-rollback';
import { stampingSettled } from '@/lib/services/stamp-checkpoints';
import { sealRecord } from '../setup/sealed-record';
import { resetTestDatabase, useTestDatabase } from '../setup/test-database';

useTestDatabase();

const copy = path.join(env.dataFolder, 'yesterday.copy');
const odometer = (value: string) => ({ body: { odometer: { value, unit: '[mi_i]', instrument: 0 } } });

async function keepACopy() {
  await stampingSettled();
  rmSync(copy, { force: true });
  await database().query(`VACUUM INTO '${copy}'`);
}
async function putTheCopyBack() {
  await stampingSettled();
  await closeDatabase();
  for (const suffix of ['', '-wal', '-shm']) rmSync(databaseFile() + suffix, { force: true });
  copyFileSync(copy, databaseFile());
  await prepareDatabase();
}

describe('an older database put back', () => {
  it('is noticed at the start and at the next seal, which is refused with the numbers', async () => {
    const { machine, machineId, shelf, seal } = await sealRecord();
    await keepACopy();
    await seal(machine.log, 'reading', odometer('18300'));
    expect(await noticeRollbacks()).toEqual([]);
    await putTheCopyBack();
    const sentence = new RegExp(`the database holds 3 entries of log ${machine.log}, but 4 were given out`);
    expect(await noticeRollbacks()).toEqual([
      {
        log: machine.log,
        subject: { kind: 'machine', id: machineId },
        issued: { size: 4, note: issuedCheckpoint(machine.log)?.note },
        stored: { size: 3, note: (await lastCheckpoint(machine.log))?.note },
        sentence: expect.stringMatching(sentence) as string,
      },
    ]);
    await expect(seal(machine.log, 'reading', odometer('18200'))).rejects.toMatchObject({
      code: 'rolled-back',
      message: expect.stringMatching(sentence) as string,
    });
    expect(issuedCheckpoint(machine.log)?.size).toBe(4);
    // Every other log goes on: the shelf's is as it was given out.
    const elsewhere = await seal(shelf.log, 'disposal', {
      body: { line: 1, amount: '1', unit: '[qt_us]', why: 'old' },
    });
    expect(elsewhere.seq).toBe(3);
  });

  it('is noticed too when it has grown past the old size again without this check', async () => {
    await resetTestDatabase();
    const { machine, seal } = await sealRecord();
    await keepACopy();
    await seal(machine.log, 'reading', odometer('18300'));
    const file = path.join(env.dataFolder, 'checkpoints', `${machine.log}.note`);
    const issued = readFileSync(file, 'utf8');
    await putTheCopyBack();
    // Somebody removes the memory, seals twice, and puts it back.
    rmSync(file);
    await seal(machine.log, 'reading', odometer('18301'));
    await seal(machine.log, 'reading', odometer('18302'));
    writeFileSync(file, issued);
    await expect(seal(machine.log, 'reading', odometer('18303'))).rejects.toMatchObject({ code: 'rolled-back' });
    expect(await noticeRollbacks()).toEqual([
      expect.objectContaining({ sentence: expect.stringContaining('are not those that were given out') as string }),
    ]);
  });
});

describe('a memory that cannot be read', () => {
  it.each([
    ['holds something else', () => 'nothing'],
    ['is empty', () => ''],
    [
      'is about another log',
      (other: string) => readFileSync(path.join(env.dataFolder, 'checkpoints', `${other}.note`), 'utf8'),
    ],
  ])('because it %s is not taken for none: sealing is refused and the steward is told', async (_, textOf) => {
    await resetTestDatabase();
    const { machine, shelf, seal } = await sealRecord();
    writeFileSync(path.join(env.dataFolder, 'checkpoints', `${machine.log}.note`), textOf(shelf.log));
    await expect(seal(machine.log, 'reading', odometer('18300'))).rejects.toMatchObject({
      code: 'rolled-back',
      message: expect.stringContaining('that file cannot be read') as string,
    });
    expect(await noticeRollbacks()).toEqual([expect.objectContaining({ log: machine.log, issued: null })]);
  });
});

describe('the memory of the highest checkpoint', () => {
  it('never goes down and is replaced as a whole', async () => {
    await resetTestDatabase();
    const { machine, seal } = await sealRecord();
    const file = path.join(env.dataFolder, 'checkpoints', `${machine.log}.note`);
    const older = readFileSync(file, 'utf8');
    await seal(machine.log, 'reading', odometer('18300'));
    const inode = statSync(file).ino;
    await rememberIssued(older);
    expect(issuedCheckpoint(machine.log)?.size).toBe(4);
    expect(statSync(file).ino).toBe(inode);
  });
});
