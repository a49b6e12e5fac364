import 'server-only';
import { mkdirSync } from 'node:fs';
import path from 'node:path';
import pLimit, { type LimitFunction } from 'p-limit';
import { Sequelize, Transaction, QueryTypes } from 'sequelize';
import { env } from '@/lib/env';

/** SQLite before this could lose a reset write-ahead log; WAL is refused below it. */
const oldestSafeSqlite = [3, 51, 3] as const;
const busyTimeoutMilliseconds = 10_000;

/** Next may load a module twice in one process; connection and queue must be one all the same. */
const shared = globalThis as typeof globalThis & {
  witnessmarkDatabase?: { sequelize: Sequelize; file: string };
  witnessmarkWriteQueue?: LimitFunction;
};

export const databaseFile = () => path.join(env.dataFolder, 'witnessmark.sqlite');

type RawConnection = { configure(option: 'busyTimeout', milliseconds: number): void };
type ConnectionManager = { getConnection(options: unknown): Promise<RawConnection> };

function connect(file: string): Sequelize {
  mkdirSync(path.dirname(file), { recursive: true });
  const sequelize = new Sequelize({
    dialect: 'sqlite',
    storage: file,
    logging: false,
    define: { underscored: true, timestamps: false },
  });
  // Every transaction has a connection of its own; a setting made once on the default one would not reach it.
  const manager = sequelize.connectionManager as unknown as ConnectionManager;
  const getConnection = manager.getConnection.bind(manager);
  manager.getConnection = async (options) => {
    const connection = await getConnection(options);
    connection.configure('busyTimeout', busyTimeoutMilliseconds);
    return connection;
  };
  return sequelize;
}

/** The one connection of this process. */
export function database(): Sequelize {
  const file = databaseFile();
  if (shared.witnessmarkDatabase?.file !== file) shared.witnessmarkDatabase = { sequelize: connect(file), file };
  return shared.witnessmarkDatabase.sequelize;
}

/** Puts the database into WAL mode. Throws if the bundled SQLite has the known WAL defect. */
export async function prepareDatabase(): Promise<void> {
  const rows = await database().query<{ version: string }>('SELECT sqlite_version() AS version', {
    type: QueryTypes.SELECT,
  });
  const version = rows[0]?.version ?? '0';
  const parts = version.split('.').map(Number);
  const difference = oldestSafeSqlite.map((part, i) => (parts[i] ?? 0) - part).find((d) => d !== 0) ?? 0;
  if (difference < 0) throw new Error(`SQLite ${version} is older than 3.51.3, which this program needs.`);
  await database().query('PRAGMA journal_mode = WAL');
}

export async function closeDatabase(): Promise<void> {
  await shared.witnessmarkDatabase?.sequelize.close();
  delete shared.witnessmarkDatabase;
}

/**
 * Runs `work` in an immediate transaction, one after another in this process. All writes go this way: SQLite starves
 * concurrent transactions. Every query inside must be given the transaction, or it runs outside it.
 */
export function write<T>(work: (transaction: Transaction) => Promise<T>): Promise<T> {
  shared.witnessmarkWriteQueue ??= pLimit(1);
  return shared.witnessmarkWriteQueue(() =>
    database().transaction({ type: Transaction.TYPES.IMMEDIATE }, (transaction) => work(transaction)),
  );
}

/**
 * Rewrites the whole database file and empties the write-ahead log, so that nothing deleted is left in either: a freed
 * page, or the unused end of one, keeps its old bytes otherwise. Takes its turn among the writes and, for SQLite
 * refuses to rewrite while a statement runs on the same connection, a connection of its own.
 */
export function purgeDeleted(): Promise<void> {
  shared.witnessmarkWriteQueue ??= pLimit(1);
  return shared.witnessmarkWriteQueue(async () => {
    const own = connect(databaseFile());
    try {
      await own.query('VACUUM');
      const rows = await own.query<{ busy: number }>('PRAGMA wal_checkpoint(TRUNCATE)', { type: QueryTypes.SELECT });
      if (rows[0]?.busy !== 0)
        throw new Error('The write-ahead log could not be emptied: somebody is still reading it.');
    } finally {
      await own.close();
    }
  });
}

/** What is deleted in this transaction is overwritten with zeros where it stands. */
export async function overwriteDeleted(transaction: Transaction): Promise<void> {
  await database().query('PRAGMA secure_delete = ON', { transaction });
}

export type { Transaction };
