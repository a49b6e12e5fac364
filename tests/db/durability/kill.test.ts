import { createHash } from 'node:crypto';
import { readdirSync, rmSync } from 'node:fs';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { closeDatabase } from '@/db/index';
import { entries } from '@/db/models/logs';
import { env } from '@/lib/env';
import { sweepIncomingBlobs } from '@/lib/ports/blob-store';
import { appendEntry } from '@/lib/services/append-entry';
import { checkRecords } from '@/lib/services/check-records';
import { openLog } from '@/lib/services/open-log';
import { stampingSettled } from '@/lib/services/stamp-checkpoints';
import { bundleChild, startChild } from '../../setup/child-process';
import { makePerson, useTestDatabase } from '../../setup/test-database';

// The method is Tessera's and SQLite's own (sqlite.org/testing.html, §3.2 "Crash Testing"): a process that writes is
// killed where it stands, and what it acknowledged before must be there. 200 kills with WITNESSMARK_KILLS=200.
const kills = Number(process.env.WITNESSMARK_KILLS ?? 30);
/** A child lives until so many entries are acknowledged, and then a moment longer: nobody knows what it is at by then. */
const mostAcknowledged = 8;
const longestMomentMilliseconds = 25;

useTestDatabase();

let child = '';
let rider = '';
let log = '';
beforeAll(async () => {
  child = await bundleChild('tests/db/durability/sealing-child.ts');
  rider = (await makePerson()).id;
  const body = { make: 'Corvane', model: 'Wren 300', kindOfMachine: 'motorcycle', recordStarts: { on: '2026-01-01', why: 'new' } } as const; // prettier-ignore
  log = (await openLog({ subject: 'machine', subjectId: crypto.randomUUID(), by: rider, parts: async () => ({ body }) })).log; // prettier-ignore
  await stampingSettled();
  await closeDatabase();
});
afterAll(() => rmSync(child, { force: true }));

interface Acknowledged {
  key: string;
  seq: number;
  leafHash: string;
}

/** Lets it seal for a moment after its first word, kills it, and returns what had left it by then. */
async function sealAndKill(kill: number, from: number): Promise<Acknowledged[]> {
  const running = startChild(child, ['loop', rider, String(from), log]);
  const random = createHash('sha256').update(`kill ${kill}`).digest();
  const lines = random.readUInt8(0) % mostAcknowledged;
  const moment = (random.readUInt16BE(1) / 65_536) * longestMomentMilliseconds;
  let isDying = false;
  let [output, errors] = ['', ''];
  running.stderr?.on('data', (data: Buffer) => (errors += data.toString()));
  running.stdout?.on('data', (data: Buffer) => {
    output += data.toString();
    if (isDying || output.split('\n').length - 1 < lines + 1) return;
    isDying = true;
    setTimeout(() => running.kill('SIGKILL'), moment);
  });
  const signal = await new Promise((resolve) => running.once('close', (_, by) => resolve(by)));
  expect([signal, errors]).toEqual(['SIGKILL', '']);
  const whole = output.split('\n').slice(1, -1);
  return whole.map((line) => {
    const [key = '', , seq = '', leafHash = ''] = line.split(' ');
    return { key, seq: Number(seq), leafHash };
  });
}

describe(`a server killed ${kills} times while it seals`, () => {
  it(
    'loses nothing it acknowledged, breaks nothing, and seals nothing twice',
    { timeout: 60_000 + kills * 20_000 },
    async () => {
      const acknowledged = new Map<string, Acknowledged>();
      let next = 0;
      for (let kill = 0; kill < kills; kill += 1) {
        for (const one of await sealAndKill(kill, next)) acknowledged.set(one.key, one);
        // The device tries again with the same key what it has no answer for.
        next = acknowledged.size;
      }
      expect(acknowledged.size).toBeGreaterThan(kills);

      const stored = await entries.all({ logId: log }, { order: [['seq', 'ASC']] });
      expect(stored.map(({ seq }) => seq)).toEqual(stored.map((_, index) => index));
      const byKey = new Map(stored.map((row) => [row.idempotencyKey, row]));
      for (const { key, seq, leafHash } of acknowledged.values()) {
        expect(byKey.get(key), `${key} was acknowledged`).toMatchObject({ seq, leafHash });
      }
      // At most the one that was under way at the last kill is there without having been acknowledged.
      expect(stored.length - 1 - acknowledged.size).toBeLessThanOrEqual(1);

      const last = stored.at(-1)!;
      const again = await appendEntry({ log, kind: 'reading', by: rider, idempotencyKey: last.idempotencyKey, parts: async () => ({}) }); // prettier-ignore
      expect(again).toMatchObject({ seq: last.seq, leafHash: last.leafHash, isNew: false });
      await stampingSettled();
      expect(await checkRecords()).toMatchObject({ problemCount: 0, problems: [], entries: stored.length });
    },
  );

  it('leaves nothing half-written once the next start has swept', async () => {
    await sweepIncomingBlobs(0);
    expect(readdirSync(path.join(env.dataFolder, 'blobs', 'incoming'))).toEqual([]);
    const left = readdirSync(env.dataFolder, { recursive: true, encoding: 'utf8' });
    expect(left.filter((name) => /\.note\.[0-9a-f-]{36}$/.test(name))).toEqual([]);
  });
});
