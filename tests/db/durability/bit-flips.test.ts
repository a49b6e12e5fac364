import { createHash } from 'node:crypto';
import { readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { QueryTypes } from 'sequelize';
import { beforeAll, describe, expect, it } from 'vitest';
import { closeDatabase, database, databaseFile } from '@/db/index';
import { countedTables } from '@/db/queries/stored-lines';
import { env } from '@/lib/env';
import { checkRecords } from '@/lib/services/check-records';
import { stampingSettled } from '@/lib/services/stamp-checkpoints';
import { buildProofWorld } from '../../setup/proof-world';
import { useTestDatabase } from '../../setup/test-database';

// The method is Trillian's and Tessera's, whose tests feed a log's clients wrong leaves, roots and damaged tiles; that
// SQLite's own check misses most of it was measured here (200 flips: it found 28). Random, but the same in every run.
const flips = Number(process.env.WITNESSMARK_FLIPS ?? 200);
const flipsOfFiles = Math.ceil(flips / 10);

useTestDatabase();

/** What is sealed, column by column; the rest (who pressed the button, retry keys, when a row was written) is not. */
const sealedColumns: Record<(typeof countedTables)[number] | 'logs' | 'erasures', string> = {
  logs: 'id, subject, subject_id, origin, key_name',
  entries: 'log_id, seq, kind, sealed_at, leaf_hash, previous, refers_to_seq, leaf',
  entry_parts: 'log_id, seq, name, disclosure',
  checkpoints: 'log_id, size, root, note, tree, created_at',
  tokens: 'log_id, size, sha256, authority, gen_time, token, is_own_authority, created_at',
  draws: 'shelf_log, purchase_seq, line, machine_log, entry_seq, position, amount, unit, drawn_on',
  erasures: 'log_id, seq, name, erased_at, erased_by, recorded_seq',
};

async function sealedContent(): Promise<string> {
  const rows: unknown[] = [];
  for (const [table, columns] of Object.entries(sealedColumns)) {
    // Both ways to a row: from page to page, and by its keys in order.
    const scan = `SELECT ${columns} FROM ${table} NOT INDEXED`;
    rows.push(await database().query(scan, { type: QueryTypes.SELECT }));
    rows.push(
      await database().query(`SELECT ${columns} FROM ${table} ORDER BY ${columns}`, { type: QueryTypes.SELECT }),
    );
  }
  return JSON.stringify(rows);
}

/** SHA-256 of a running number: the same places in every run, and no pattern in them. */
function placeOf(flip: number, bytes: number): { byte: number; bit: number } {
  const hash = createHash('sha256').update(`flip ${flip}`).digest();
  return { byte: hash.readUIntBE(0, 6) % bytes, bit: hash.readUInt8(6) % 8 };
}

let pristine: Buffer;
let content = '';

async function putBack(bytes: Buffer): Promise<void> {
  await closeDatabase();
  for (const suffix of ['-wal', '-shm', '-journal']) rmSync(databaseFile() + suffix, { force: true });
  writeFileSync(databaseFile(), bytes);
}

beforeAll(async () => {
  await buildProofWorld();
  await stampingSettled();
  expect(await checkRecords()).toMatchObject({ problemCount: 0, problems: [], logs: 2 });
  content = await sealedContent();
  await database().query('PRAGMA wal_checkpoint(TRUNCATE)');
  await closeDatabase();
  pristine = readFileSync(databaseFile());
}, 60_000);

async function flipOne(flip: number): Promise<{ bySqlite: boolean; byCheck: boolean; isSame: boolean | null }> {
  const { byte, bit } = placeOf(flip, pristine.length);
  const damaged = Buffer.from(pristine);
  damaged.writeUInt8(damaged.readUInt8(byte) ^ (1 << bit), byte);
  await putBack(damaged);
  const { problems } = await checkRecords();
  const bySqlite = problems.some(
    ({ sentence }) => sentence.startsWith('SQLite') || sentence.startsWith('The database file'),
  );
  const byCheck = problems.length > 0;
  if (byCheck) return { bySqlite, byCheck, isSame: null };
  return { bySqlite, byCheck, isSame: (await sealedContent().catch(() => 'unreadable')) === content };
}

describe(`${flips} random bit flips`, () => {
  it(
    'in the database are found wherever they change anything that is sealed',
    { timeout: 60_000 + flips * 5_000 },
    async () => {
      const missed: string[] = [];
      let [bySqlite, byCheck] = [0, 0];
      for (let flip = 0; flip < flips; flip += 1) {
        const found = await flipOne(flip);
        if (found.bySqlite) bySqlite += 1;
        if (found.byCheck) byCheck += 1;
        if (found.isSame === false) missed.push(`flip ${flip} at byte ${placeOf(flip, pristine.length).byte}`);
      }
      await putBack(pristine);
      expect(missed).toEqual([]);
      // The store is small and much of its file empty or not sealed; without the check of records fewer would be found.
      expect(byCheck).toBeGreaterThan(bySqlite);
      expect(await checkRecords()).toMatchObject({ problemCount: 0 });
      process.stdout.write(`\n${flips} flips of the database: SQLite found ${bySqlite}, the check ${byCheck}.\n`);
    },
  );

  it('in stored files are all found, and each names its file', { timeout: 60_000 + flipsOfFiles * 5_000 }, async () => {
    const folder = path.join(env.dataFolder, 'blobs');
    const files = readdirSync(folder, { recursive: true, encoding: 'utf8' }).filter((name) =>
      /[0-9a-f]{64}$/.test(name),
    );
    expect(files.length).toBeGreaterThan(3);
    for (let flip = 0; flip < flipsOfFiles; flip += 1) {
      const file = path.join(folder, files[flip % files.length] ?? '');
      const bytes = readFileSync(file);
      const { byte, bit } = placeOf(flip, bytes.length);
      const damaged = Buffer.from(bytes);
      damaged.writeUInt8(damaged.readUInt8(byte) ^ (1 << bit), byte);
      writeFileSync(file, damaged);
      const { problems } = await checkRecords();
      expect(problems.map(({ sentence }) => sentence)).toEqual([
        `The stored file ${path.basename(file)} is not what was sent in.`,
      ]);
      writeFileSync(file, bytes);
    }
  });
});
