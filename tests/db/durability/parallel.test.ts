import { rmSync } from 'node:fs';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { closeDatabase } from '@/db/index';
import { entries } from '@/db/models/logs';
import { lastCheckpoint } from '@/db/queries/logs';
import { appendEntry } from '@/lib/services/append-entry';
import { issuedCheckpoint } from '@/lib/ports/issued-checkpoints';
import { checkRecords } from '@/lib/services/check-records';
import { openLog } from '@/lib/services/open-log';
import { stampingSettled } from '@/lib/services/stamp-checkpoints';
import { bundleChild, endOf, startChild } from '../../setup/child-process';
import { makePerson, resetTestDatabase, useTestDatabase } from '../../setup/test-database';

// The method is Tessera's "hammer": many writers at once, and then one question, whether there is one order. 500 seals
// over three logs; each must have a number of its own, without a gap, under a tree that every checkpoint agrees with.
const seals = 500;

useTestDatabase();

let child = '';
beforeAll(async () => {
  child = await bundleChild('tests/db/durability/sealing-child.ts');
});
afterAll(() => rmSync(child, { force: true }));

async function openThree(): Promise<{ rider: string; logs: string[] }> {
  await resetTestDatabase();
  const { id: rider } = await makePerson();
  const body = { make: 'Corvane', model: 'Wren 300', kindOfMachine: 'motorcycle', recordStarts: { on: '2026-01-01', why: 'new' } } as const; // prettier-ignore
  const logs: string[] = [];
  for (let number = 0; number < 3; number += 1) {
    const subjectId = crypto.randomUUID();
    logs.push((await openLog({ subject: 'machine', subjectId, by: rider, parts: async () => ({ body }) })).log);
  }
  return { rider, logs };
}

async function demandOneOrder(logs: string[]): Promise<void> {
  await stampingSettled();
  let total = 0;
  for (const log of logs) {
    const rows = await entries.all({ logId: log }, { order: [['seq', 'ASC']] });
    expect(rows.map(({ seq }) => seq)).toEqual(rows.map((_, index) => index));
    const last = await lastCheckpoint(log);
    expect(last?.size).toBe(rows.length);
    expect(issuedCheckpoint(log)?.size).toBe(rows.length);
    total += rows.length - 1;
  }
  expect(total).toBe(seals);
  expect(await checkRecords()).toMatchObject({ problemCount: 0, problems: [], entries: seals + logs.length });
}

describe(`${seals} seals at once`, () => {
  it('in one process make one order', { timeout: 400_000 }, async () => {
    const { rider, logs } = await openThree();
    const sealed = await Promise.all(
      Array.from({ length: seals }, (_, number) =>
        appendEntry({
          log: logs[number % logs.length] ?? '',
          kind: 'reading',
          by: rider,
          idempotencyKey: `one/${number}`,
          parts: async () => ({ body: { on: '2026-04-18', odometer: { value: String(number), unit: '[mi_i]', instrument: 0 } } }), // prettier-ignore
        }),
      ),
    );
    expect(new Set(sealed.map(({ log, seq }) => `${log}/${seq}`)).size).toBe(seals);
    await demandOneOrder(logs);
  });

  it('in two processes make one order', { timeout: 400_000 }, async () => {
    const { rider, logs } = await openThree();
    await stampingSettled();
    await closeDatabase();
    const ends = await Promise.all(
      ['first', 'second'].map((name) =>
        endOf(startChild(child, ['parallel', rider, name, String(seals / 2), ...logs])),
      ),
    );
    expect(ends.map(({ status, errors }) => [status, errors])).toEqual([
      [0, ''],
      [0, ''],
    ]);
    const acknowledged = ends.flatMap(({ output }) => output.trim().split('\n'));
    expect(new Set(acknowledged.map((line) => line.split(' ').slice(1, 3).join('/'))).size).toBe(seals);
    await demandOneOrder(logs);
  });
});
