import 'server-only';
import { Op, QueryTypes } from 'sequelize';
import { database } from '../index';
import {
  checkpoints,
  type CheckpointRow,
  draws,
  type DrawRow,
  entries,
  entryParts,
  type EntryPartRow,
  type EntryRow,
  erasures,
  type ErasureRow,
  stampJobs,
  type StampJobRow,
  tokens,
  type TokenRow,
} from '../models/logs';

/** Some lines of a log, from one seq on, with everything that is stored beside them. */
export interface StoredLines {
  entries: EntryRow[];
  parts: EntryPartRow[];
  checkpoints: CheckpointRow[];
  tokens: TokenRow[];
  stampJobs: StampJobRow[];
  draws: DrawRow[];
  erasures: ErasureRow[];
}

/** Lines `from` to `to` (not included), found by their keys as the app finds them. */
export async function readStoredLines(logId: string, from: number, to: number): Promise<StoredLines> {
  const seq = { [Op.gte]: from, [Op.lt]: to };
  const size = { [Op.gt]: from, [Op.lte]: to };
  return {
    entries: await entries.all({ logId, seq }, { order: [['seq', 'ASC']] }),
    parts: await entryParts.all({ logId, seq }, { order: [['seq', 'ASC'], ['name', 'ASC']] }), // prettier-ignore
    checkpoints: await checkpoints.all({ logId, size }, { order: [['size', 'ASC']] }),
    tokens: await tokens.all({ logId, size }, { order: [['size', 'ASC'], ['genTime', 'ASC']] }), // prettier-ignore
    stampJobs: await stampJobs.all({ logId, size }),
    draws: await draws.all({ machineLog: logId, entrySeq: seq }, { order: [['entrySeq', 'ASC'], ['position', 'ASC']] }), // prettier-ignore
    erasures: await erasures.all({ logId, seq }),
  };
}

export const countedTables = ['entries', 'entry_parts', 'checkpoints', 'tokens', 'draws'] as const;
export type CountedTable = (typeof countedTables)[number];

/**
 * How many rows each log has in each table, at one moment, read from the first page to the last without any index:
 * what is stored, whether or not it is found by its key.
 */
export async function countStoredRows(): Promise<{ table: CountedTable; log: string; rows: number }[]> {
  const one = (table: CountedTable) => {
    const log = table === 'draws' ? 'machine_log' : 'log_id';
    return `SELECT '${table}' AS "table", ${log} AS log, COUNT(*) AS rows FROM ${table} NOT INDEXED GROUP BY ${log}`;
  };
  return database().query(countedTables.map(one).join(' UNION ALL '), { type: QueryTypes.SELECT });
}

/** What SQLite itself finds wrong: with its pages and indexes, and with rows that name others which are not there. */
export async function askSqlite(): Promise<string[]> {
  const damages = await database().query<{ integrity_check: string }>('PRAGMA integrity_check(100)', {
    type: QueryTypes.SELECT,
  });
  const orphans = await database().query<{ table: string; parent: string }>('PRAGMA foreign_key_check', {
    type: QueryTypes.SELECT,
  });
  return [
    ...damages.map((row) => row.integrity_check).filter((said) => said !== 'ok'),
    ...orphans.slice(0, 100).map(({ table, parent }) => `a row of ${table} names a row of ${parent} that is not there`),
  ];
}
