import type { Migration } from '../migrate';

/**
 * What later proof needs: drafts of addenda, parts that may be erased if that is recorded, what a packet or a viewing
 * link opens, signers' own keys, addresses that keep checkpoints, and records read in from elsewhere.
 *
 * A CHECK cannot be altered in place, so `drafts` is made anew; foreign keys are asked again before it is committed.
 */
const drafts = [
  'PRAGMA foreign_keys = OFF',
  'BEGIN IMMEDIATE',
  `CREATE TABLE drafts_new (
    id TEXT PRIMARY KEY, kind TEXT NOT NULL CHECK (kind IN ('worksheet','receipt','addendum')), subject_id TEXT NOT NULL,
    created_by TEXT NOT NULL REFERENCES people(id), created_at TEXT NOT NULL, changed_at TEXT NOT NULL,
    state TEXT NOT NULL DEFAULT 'open' CHECK (state IN ('open','sealed','discarded')),
    sealed_log TEXT, sealed_seq INTEGER, refers_to_seq INTEGER
  )`,
  `INSERT INTO drafts_new (id, kind, subject_id, created_by, created_at, changed_at, state, sealed_log, sealed_seq)
    SELECT id, kind, subject_id, created_by, created_at, changed_at, state, sealed_log, sealed_seq FROM drafts`,
  'DROP TABLE drafts',
  'ALTER TABLE drafts_new RENAME TO drafts',
  'CREATE INDEX drafts_subject ON drafts (subject_id, state)',
  'COMMIT',
  'PRAGMA foreign_keys = ON',
];

const statements = [
  `CREATE TABLE erasures (
    log_id TEXT NOT NULL REFERENCES logs(id), seq INTEGER NOT NULL, name TEXT NOT NULL, erased_at TEXT NOT NULL,
    erased_by TEXT NOT NULL REFERENCES people(id), recorded_seq INTEGER NOT NULL,
    PRIMARY KEY (log_id, seq, name)
  ) WITHOUT ROWID`,
  `CREATE TRIGGER erasures_insert BEFORE INSERT ON erasures BEGIN
    SELECT RAISE(ABORT, 'erasures are append-only: this part is erased already') WHERE EXISTS (
      SELECT 1 FROM erasures WHERE log_id = NEW.log_id AND seq = NEW.seq AND name = NEW.name);
    SELECT RAISE(ABORT, 'an erasure is recorded by a later entry of the same log') WHERE NEW.recorded_seq <= NEW.seq
      OR NOT EXISTS (SELECT 1 FROM entries WHERE log_id = NEW.log_id AND seq = NEW.recorded_seq);
  END`,
  `CREATE TRIGGER erasures_update BEFORE UPDATE ON erasures BEGIN SELECT RAISE(ABORT, 'erasures are append-only'); END`,
  `CREATE TRIGGER erasures_delete BEFORE DELETE ON erasures BEGIN SELECT RAISE(ABORT, 'erasures are append-only'); END`,
  'DROP TRIGGER entry_parts_delete',
  `CREATE TRIGGER entry_parts_delete BEFORE DELETE ON entry_parts BEGIN
    SELECT RAISE(ABORT, 'entry parts are append-only: only a recorded erasure takes one away') WHERE NOT EXISTS (
      SELECT 1 FROM erasures WHERE log_id = OLD.log_id AND seq = OLD.seq AND name = OLD.name);
  END`,
  // What a packet or link opens, as JSON (lib/domain/scope.ts); null: everything but prices.
  'ALTER TABLE viewing_links ADD COLUMN scope TEXT',
  'ALTER TABLE packets ADD COLUMN scope TEXT',
  `CREATE TABLE passkeys (
    id TEXT PRIMARY KEY, person_id TEXT NOT NULL REFERENCES people(id), credential_id TEXT NOT NULL UNIQUE,
    public_key TEXT NOT NULL, cose_key TEXT NOT NULL, sign_count INTEGER NOT NULL, rp_id TEXT NOT NULL,
    name TEXT NOT NULL, transports TEXT NOT NULL DEFAULT '[]', created_at TEXT NOT NULL, last_used_at TEXT,
    revoked_at TEXT
  )`,
  'CREATE INDEX passkeys_person ON passkeys (person_id)',
  `CREATE TABLE passkey_challenges (
    id TEXT PRIMARY KEY, person_id TEXT NOT NULL REFERENCES people(id), challenge TEXT NOT NULL, detail TEXT NOT NULL,
    created_at TEXT NOT NULL, expires_at TEXT NOT NULL, used_at TEXT
  )`,
  `CREATE TABLE checkpoint_keepers (
    id TEXT PRIMARY KEY, machine_id TEXT NOT NULL REFERENCES machines(id), email TEXT NOT NULL,
    token_hash TEXT NOT NULL UNIQUE, added_by TEXT NOT NULL REFERENCES people(id), added_at TEXT NOT NULL,
    confirmed_at TEXT, ended_at TEXT
  )`,
  'CREATE INDEX checkpoint_keepers_machine ON checkpoint_keepers (machine_id)',
  `CREATE TABLE checkpoint_mails (
    keeper_id TEXT NOT NULL REFERENCES checkpoint_keepers(id), log_id TEXT NOT NULL, size INTEGER NOT NULL,
    attempts INTEGER NOT NULL DEFAULT 0, next_try_at TEXT NOT NULL, last_error TEXT, sent_at TEXT,
    PRIMARY KEY (keeper_id, log_id, size)
  )`,
  `CREATE TABLE imported_records (
    id TEXT PRIMARY KEY, person_id TEXT NOT NULL REFERENCES people(id), name TEXT NOT NULL, number TEXT NOT NULL,
    made_at TEXT NOT NULL, log_id TEXT NOT NULL, size INTEGER NOT NULL, root TEXT NOT NULL, outcome TEXT NOT NULL,
    file_sha256 TEXT NOT NULL, bytes INTEGER NOT NULL, imported_at TEXT NOT NULL, removed_at TEXT
  )`,
  'CREATE INDEX imported_records_person ON imported_records (person_id)',
];

export const proofFurther: Migration = {
  name: '0003-proof-further',
  async up({ run }) {
    for (const statement of [...drafts, ...statements]) await run(statement);
  },
};
