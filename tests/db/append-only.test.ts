import { execFile } from 'node:child_process';
import { promisify } from 'node:util';
import { QueryTypes } from 'sequelize';
import { beforeAll, describe, expect, it } from 'vitest';
import { database, databaseFile, write } from '@/db/index';
import { insertDraws } from '@/db/queries/lots';
import { stampingSettled } from '@/lib/services/stamp-checkpoints';
import { sealRecord } from '../setup/sealed-record';
import { useTestDatabase } from '../setup/test-database';

useTestDatabase();

/** A conflicting copy of a stored line, a change and a deletion: what an operator with a database shell would try. */
const attempts = [
  ['entries', "UPDATE entries SET leaf = '{}'"],
  ['entries', "UPDATE entries SET sealed_at = '2020-01-01T00:00:00.000Z' WHERE seq = 0"],
  ['entries', 'DELETE FROM entries'],
  ['entries', 'INSERT OR REPLACE INTO entries SELECT * FROM entries WHERE seq = 1'],
  ['entries', 'REPLACE INTO entries SELECT * FROM entries WHERE seq = 0'],
  [
    'entries',
    `INSERT OR REPLACE INTO entries SELECT log_id, seq + 1000, kind, sealed_at, leaf_hash, previous, refers_to_seq, leaf,
     sealed_by, 'another key' FROM entries WHERE seq = 1`,
  ],
  [
    'entries',
    `INSERT INTO entries SELECT log_id, seq + 2, kind, sealed_at, 'f', previous, refers_to_seq, leaf, sealed_by, 'gap'
     FROM entries ORDER BY seq DESC LIMIT 1`,
  ],
  ['entry_parts', "UPDATE entry_parts SET disclosure = 'x'"],
  ['entry_parts', "DELETE FROM entry_parts WHERE name = 'prices'"],
  ['entry_parts', 'INSERT OR REPLACE INTO entry_parts SELECT * FROM entry_parts'],
  ['entry_parts', "INSERT INTO entry_parts SELECT log_id, 0, 'notes', disclosure FROM entry_parts WHERE seq = 1"],
  // The newest entry is the only one whose parts have the right number.
  [
    'entry_parts',
    `INSERT INTO entry_parts SELECT log_id, seq, 'late', disclosure FROM entry_parts
     WHERE (log_id, seq) IN (SELECT log_id, MAX(seq) FROM entries GROUP BY log_id) LIMIT 1`,
  ],
  ['entry_parts', "UPDATE OR REPLACE entry_parts SET name = 'body'"],
  ['checkpoints', "UPDATE checkpoints SET note = 'x'"],
  ['checkpoints', 'DELETE FROM checkpoints WHERE size = 3'],
  ['checkpoints', 'INSERT OR REPLACE INTO checkpoints SELECT * FROM checkpoints'],
  ['checkpoints', "INSERT INTO checkpoints SELECT log_id, size + 5, root, note, tree, 'now' FROM checkpoints LIMIT 1"],
  ['tokens', "UPDATE tokens SET gen_time = '2020-01-01T00:00:00.000Z'"],
  ['tokens', 'DELETE FROM tokens'],
  ['tokens', 'INSERT OR REPLACE INTO tokens SELECT * FROM tokens'],
  [
    'tokens',
    "INSERT INTO tokens SELECT log_id, size + 900, 'f', authority, gen_time, token, 0, created_at FROM tokens LIMIT 1",
  ],
  ['draws', "UPDATE draws SET amount = '0'"],
  ['draws', 'DELETE FROM draws'],
  ['draws', 'REPLACE INTO draws SELECT * FROM draws LIMIT 1'],
  [
    'draws',
    `INSERT OR REPLACE INTO draws (rowid, shelf_log, purchase_seq, line, machine_log, entry_seq, position, amount, unit,
     drawn_on) SELECT rowid, shelf_log, purchase_seq, line, machine_log, entry_seq, position + 50, '0', unit, drawn_on
     FROM draws LIMIT 1`,
  ],
  ['logs', "UPDATE logs SET origin = 'elsewhere.example'"],
  ['logs', "UPDATE logs SET subject_id = 'another'"],
  ['logs', 'DELETE FROM logs'],
  ['logs', 'REPLACE INTO logs SELECT * FROM logs LIMIT 1'],
  [
    'logs',
    `INSERT OR REPLACE INTO logs (rowid, id, subject, subject_id, origin, key_name, times_injected, created_at)
     SELECT rowid, 'another', subject, 'another', origin, key_name, 0, created_at FROM logs LIMIT 1`,
  ],
] as const;

const contents = async (table: string) => database().query(`SELECT * FROM ${table}`, { type: QueryTypes.SELECT });

describe('what was sealed', () => {
  beforeAll(async () => {
    const { machine, shelf } = await sealRecord();
    const draw = {
      machineLog: machine.log,
      shelfLog: shelf.log,
      purchaseSeq: 1,
      line: 1,
      entrySeq: 2,
      unit: '[qt_us]',
      drawnOn: '2026-04-18',
    };
    const draws = [0, 1, 2].map((position) => ({ ...draw, position, amount: '1' }));
    await write((transaction) => insertDraws(draws, transaction));
    await stampingSettled();
  });

  it('stands in every table that the attempts below aim at', async () => {
    for (const table of ['entries', 'entry_parts', 'checkpoints', 'tokens', 'draws', 'logs']) {
      expect((await contents(table)).length, table).toBeGreaterThan(1);
    }
  });

  it.each(attempts)('stays as it is in %s against: %s', async (table, statement) => {
    const before = await contents(table);
    // Sequelize keeps SQLite's own words in `parent`.
    await expect(database().query(statement)).rejects.toMatchObject({
      parent: { message: expect.stringContaining('append-only') as string },
    });
    expect(await contents(table)).toEqual(before);
  });

  it.each(attempts)('stays as it is in %s from the sqlite3 command line: %s', async (table, statement) => {
    const before = await contents(table);
    await expect(promisify(execFile)('sqlite3', [databaseFile(), statement])).rejects.toThrow(/append-only/);
    expect(await contents(table)).toEqual(before);
  });
});
