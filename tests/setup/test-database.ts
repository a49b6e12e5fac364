import { createHash, randomUUID } from 'node:crypto';
import { copyFileSync, existsSync, mkdirSync, readdirSync, readFileSync, renameSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll } from 'vitest';
import { closeDatabase, databaseFile, prepareDatabase } from '@/db/index';
import { migrate } from '@/db/migrate';
import { people, type PersonRow } from '@/db/models/people';
import { env } from '@/lib/env';
import { stampingSettled } from '@/lib/services/stamp-checkpoints';

/**
 * Gives this test file a migrated, empty database in its own data folder (set by tests/setup/data-folder.ts).
 * Call it once at the top of the file. The schema is migrated once per machine and copied.
 *
 * @example
 * useTestDatabase();
 * it('keeps what was sealed', async () => { const rider = await makePerson(); … });
 */
export function useTestDatabase(): void {
  beforeAll(async () => {
    await copyTemplate();
  });
  afterAll(async () => {
    await stampingSettled();
    await closeDatabase();
  });
}

/** Throws everything away and begins again with an empty, migrated database; keys are kept. */
export async function resetTestDatabase(): Promise<void> {
  await stampingSettled();
  await closeDatabase();
  for (const suffix of ['', '-wal', '-shm']) rmSync(databaseFile() + suffix, { force: true });
  rmSync(path.join(env.dataFolder, 'checkpoints'), { recursive: true, force: true });
  await copyTemplate();
}

/** A person who can seal. The password hash is not one: such a person cannot sign in. */
export async function makePerson(values: Partial<PersonRow> = {}): Promise<PersonRow> {
  const id = values.id ?? randomUUID();
  const person: PersonRow = {
    id,
    email: `${id}@rider.example`,
    name: 'Imke Vandersloot',
    passwordHash: '-',
    emailConfirmedAt: '2025-01-01T00:00:00.000Z',
    isSteward: false,
    distanceUnit: '[mi_i]',
    volumeUnit: '[qt_us]',
    torqueUnit: '[ft_i].[lbf_av]',
    timeZone: 'UTC',
    createdAt: '2025-01-01T00:00:00.000Z',
    ...values,
  };
  await people.insert(person);
  return person;
}

async function copyTemplate(): Promise<void> {
  const template = templateFile();
  mkdirSync(env.dataFolder, { recursive: true });
  if (!existsSync(template)) {
    await migrate();
    await closeDatabase();
    // Two workers may come here at once: a rename leaves one whole file.
    const own = `${template}.${randomUUID()}`;
    copyFileSync(databaseFile(), own);
    renameSync(own, template);
  } else {
    copyFileSync(template, databaseFile());
  }
  await prepareDatabase();
}

/** Another schema has another name, so a stale template is never used. */
function templateFile(): string {
  const folder = path.join(import.meta.dirname, '../../db');
  const hash = createHash('sha256').update(readFileSync(path.join(folder, 'migrate.ts')));
  for (const name of readdirSync(path.join(folder, 'migrations')).sort()) {
    hash.update(readFileSync(path.join(folder, 'migrations', name)));
  }
  return path.join(tmpdir(), `witnessmark-template-${hash.digest('hex').slice(0, 16)}.sqlite`);
}
