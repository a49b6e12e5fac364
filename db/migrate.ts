import 'server-only';
import { Umzug, type UmzugStorage } from 'umzug';
import { QueryTypes } from 'sequelize';
import { database } from './index';
import { first } from './migrations/0001-first';
import { appendOnlyFurther } from './migrations/0002-append-only-further';
import { proofFurther } from './migrations/0003-proof-further';

export interface Migration {
  name: string;
  up(context: { run: (sql: string) => Promise<void> }): Promise<void>;
}

/** In order. A released migration is never edited; a change of the schema is a new one. */
const migrations: Migration[] = [first, appendOnlyFurther, proofFurther];

const storage: UmzugStorage = {
  async logMigration({ name }) {
    await database().query('INSERT INTO migrations (name, run_at) VALUES (?, ?)', {
      replacements: [name, new Date().toISOString()],
    });
  },
  async unlogMigration() {
    throw new Error('Migrations of a record are never undone.');
  },
  async executed() {
    await database().query('CREATE TABLE IF NOT EXISTS migrations (name TEXT PRIMARY KEY, run_at TEXT NOT NULL)');
    const rows = await database().query<{ name: string }>('SELECT name FROM migrations ORDER BY name', {
      type: QueryTypes.SELECT,
    });
    return rows.map((row) => row.name);
  },
};

/** Brings the database to the newest schema. Safe to call at every start; returns the names that ran. */
export async function migrate(): Promise<string[]> {
  const umzug = new Umzug({
    migrations: migrations.map((migration) => ({
      name: migration.name,
      up: () => migration.up({ run: async (sql) => void (await database().query(sql)) }),
    })),
    storage,
    logger: undefined,
  });
  return (await umzug.up()).map((migration) => migration.name);
}
