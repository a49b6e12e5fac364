import type { Migration } from '../migrate';

/**
 * The whole first schema. Instants are ISO 8601 text in UTC with milliseconds; ids are UUIDs as text.
 *
 * `entries`, `entry_parts`, `checkpoints` and `tokens` are append-only. They have no rowid, because INSERT OR REPLACE
 * may name a rowid and so delete another line; and since REPLACE does not fire delete triggers, a BEFORE INSERT trigger
 * refuses every row whose key exists or whose number is not the log's next.
 */
const statements = `
CREATE TABLE people (
  id TEXT PRIMARY KEY, email TEXT NOT NULL UNIQUE, name TEXT NOT NULL, password_hash TEXT NOT NULL,
  email_confirmed_at TEXT, is_steward INTEGER NOT NULL DEFAULT 0,
  distance_unit TEXT NOT NULL DEFAULT '[mi_i]', volume_unit TEXT NOT NULL DEFAULT '[qt_us]',
  torque_unit TEXT NOT NULL DEFAULT '[ft_i].[lbf_av]', time_zone TEXT NOT NULL DEFAULT 'UTC', created_at TEXT NOT NULL
);
CREATE TABLE sessions (
  id TEXT PRIMARY KEY, person_id TEXT NOT NULL REFERENCES people(id), created_at TEXT NOT NULL,
  last_seen_at TEXT NOT NULL, expires_at TEXT NOT NULL, ended_at TEXT, device TEXT NOT NULL DEFAULT ''
);
CREATE INDEX sessions_person ON sessions (person_id);
CREATE TABLE mail_tokens (
  token_hash TEXT PRIMARY KEY, purpose TEXT NOT NULL, person_id TEXT NOT NULL REFERENCES people(id),
  detail TEXT, created_at TEXT NOT NULL, expires_at TEXT NOT NULL, used_at TEXT
);
CREATE TABLE attempts (key TEXT NOT NULL, at TEXT NOT NULL);
CREATE INDEX attempts_key ON attempts (key, at);

CREATE TABLE machines (
  id TEXT PRIMARY KEY, make TEXT NOT NULL, model TEXT NOT NULL, model_year TEXT, kind TEXT NOT NULL,
  vin TEXT, frame_number TEXT, engine_number TEXT, vin_check TEXT NOT NULL DEFAULT 'not checked',
  distance_unit TEXT NOT NULL DEFAULT '[mi_i]', time_zone TEXT NOT NULL DEFAULT 'UTC',
  first_use_on TEXT, first_use_odometer TEXT, archived_at TEXT, created_by TEXT NOT NULL REFERENCES people(id),
  created_at TEXT NOT NULL
);
CREATE TABLE shelves (
  id TEXT PRIMARY KEY, name TEXT NOT NULL, created_by TEXT NOT NULL REFERENCES people(id), created_at TEXT NOT NULL
);
CREATE TABLE shops (
  id TEXT PRIMARY KEY, name TEXT NOT NULL, address TEXT, registration TEXT,
  confirmed_by TEXT, confirmed_at TEXT, created_by TEXT NOT NULL REFERENCES people(id), created_at TEXT NOT NULL
);
CREATE TABLE relations (
  id TEXT PRIMARY KEY, person_id TEXT NOT NULL REFERENCES people(id),
  subject_kind TEXT NOT NULL CHECK (subject_kind IN ('machine','shelf','shop')), subject_id TEXT NOT NULL,
  relation TEXT NOT NULL CHECK (relation IN ('owner','helper','technician')), since TEXT NOT NULL, until TEXT
);
CREATE INDEX relations_person ON relations (person_id);
CREATE INDEX relations_subject ON relations (subject_kind, subject_id);

CREATE TABLE logs (
  id TEXT PRIMARY KEY, subject TEXT NOT NULL CHECK (subject IN ('machine','shelf')), subject_id TEXT NOT NULL UNIQUE,
  origin TEXT NOT NULL, key_name TEXT NOT NULL, times_injected INTEGER NOT NULL DEFAULT 0, created_at TEXT NOT NULL
);
CREATE TABLE entries (
  log_id TEXT NOT NULL REFERENCES logs(id), seq INTEGER NOT NULL, kind TEXT NOT NULL, sealed_at TEXT NOT NULL,
  leaf_hash TEXT NOT NULL, previous TEXT, refers_to_seq INTEGER, leaf TEXT NOT NULL,
  sealed_by TEXT NOT NULL REFERENCES people(id), idempotency_key TEXT NOT NULL UNIQUE,
  PRIMARY KEY (log_id, seq), UNIQUE (log_id, leaf_hash)
) WITHOUT ROWID;
CREATE TABLE entry_parts (
  log_id TEXT NOT NULL, seq INTEGER NOT NULL, name TEXT NOT NULL, disclosure TEXT NOT NULL,
  PRIMARY KEY (log_id, seq, name)
) WITHOUT ROWID;
CREATE TABLE checkpoints (
  log_id TEXT NOT NULL REFERENCES logs(id), size INTEGER NOT NULL, root TEXT NOT NULL, note TEXT NOT NULL,
  tree TEXT NOT NULL, created_at TEXT NOT NULL, PRIMARY KEY (log_id, size)
) WITHOUT ROWID;
CREATE TABLE tokens (
  log_id TEXT NOT NULL, size INTEGER NOT NULL, sha256 TEXT NOT NULL, authority TEXT NOT NULL,
  gen_time TEXT NOT NULL, token TEXT NOT NULL, is_own_authority INTEGER NOT NULL, created_at TEXT NOT NULL,
  PRIMARY KEY (log_id, size, sha256)
) WITHOUT ROWID;
CREATE TABLE stamp_jobs (
  log_id TEXT NOT NULL, size INTEGER NOT NULL, authority TEXT NOT NULL, attempts INTEGER NOT NULL DEFAULT 0,
  next_try_at TEXT NOT NULL, last_error TEXT, done_at TEXT, PRIMARY KEY (log_id, size, authority)
);

CREATE TABLE drafts (
  id TEXT PRIMARY KEY, kind TEXT NOT NULL CHECK (kind IN ('worksheet','receipt')), subject_id TEXT NOT NULL,
  created_by TEXT NOT NULL REFERENCES people(id), created_at TEXT NOT NULL, changed_at TEXT NOT NULL,
  state TEXT NOT NULL DEFAULT 'open' CHECK (state IN ('open','sealed','discarded')),
  sealed_log TEXT, sealed_seq INTEGER
);
CREATE INDEX drafts_subject ON drafts (subject_id, state);
CREATE TABLE draft_changes (
  draft_id TEXT NOT NULL REFERENCES drafts(id), id TEXT NOT NULL, field TEXT NOT NULL, value TEXT,
  device_at TEXT NOT NULL, server_at TEXT NOT NULL, person_id TEXT NOT NULL REFERENCES people(id),
  PRIMARY KEY (draft_id, id)
);
CREATE TABLE files (
  sha256 TEXT PRIMARY KEY, bytes INTEGER NOT NULL, media_type TEXT NOT NULL, created_at TEXT NOT NULL
);
CREATE TABLE uploads (
  id TEXT PRIMARY KEY, draft_id TEXT NOT NULL REFERENCES drafts(id), person_id TEXT NOT NULL REFERENCES people(id),
  sha256 TEXT NOT NULL REFERENCES files(sha256), name TEXT NOT NULL, received_at TEXT NOT NULL,
  taken_local TEXT, taken_offset TEXT, width INTEGER, height INTEGER,
  copy_sha256 TEXT REFERENCES files(sha256), copy_removed TEXT NOT NULL DEFAULT '[]',
  thumb_sha256 TEXT REFERENCES files(sha256)
);
CREATE INDEX uploads_draft ON uploads (draft_id);
CREATE INDEX uploads_sha256 ON uploads (sha256);
CREATE INDEX uploads_copy ON uploads (copy_sha256);
CREATE TABLE draws (
  shelf_log TEXT NOT NULL, purchase_seq INTEGER NOT NULL, line INTEGER NOT NULL,
  machine_log TEXT NOT NULL, entry_seq INTEGER NOT NULL, position INTEGER NOT NULL,
  amount TEXT NOT NULL, unit TEXT NOT NULL, drawn_on TEXT NOT NULL,
  PRIMARY KEY (machine_log, entry_seq, position)
);
CREATE INDEX draws_lot ON draws (shelf_log, purchase_seq, line);

CREATE TABLE invitations (
  id TEXT PRIMARY KEY, log_id TEXT NOT NULL, seq INTEGER NOT NULL, machine_id TEXT NOT NULL REFERENCES machines(id),
  email TEXT NOT NULL, token_hash TEXT NOT NULL UNIQUE, invited_by TEXT NOT NULL REFERENCES people(id),
  message TEXT NOT NULL DEFAULT '', created_at TEXT NOT NULL, expires_at TEXT NOT NULL, opened_at TEXT,
  reminded_at TEXT, withdrawn_at TEXT, answered_at TEXT, answered_by TEXT REFERENCES people(id), shop_id TEXT REFERENCES shops(id),
  outcome TEXT CHECK (outcome IN ('countersigned','declined')), decline_reason TEXT, answer_seq INTEGER
);
CREATE INDEX invitations_entry ON invitations (log_id, seq);
CREATE TABLE viewing_links (
  id TEXT PRIMARY KEY, machine_id TEXT NOT NULL REFERENCES machines(id), label TEXT NOT NULL,
  token_hash TEXT NOT NULL UNIQUE, created_by TEXT NOT NULL REFERENCES people(id), created_at TEXT NOT NULL,
  expires_at TEXT, revoked_at TEXT, last_opened_at TEXT, times_opened INTEGER NOT NULL DEFAULT 0, packet_id TEXT
);
CREATE INDEX viewing_links_machine ON viewing_links (machine_id);
CREATE TABLE packets (
  id TEXT PRIMARY KEY, machine_id TEXT NOT NULL REFERENCES machines(id), number TEXT NOT NULL UNIQUE,
  purpose TEXT NOT NULL, state TEXT NOT NULL CHECK (state IN ('queued','building','ready','failed')),
  stage TEXT NOT NULL DEFAULT '', progress INTEGER NOT NULL DEFAULT 0, error TEXT,
  created_by TEXT NOT NULL REFERENCES people(id), created_at TEXT NOT NULL, finished_at TEXT,
  file_sha256 TEXT, bytes INTEGER, pages INTEGER, log_size INTEGER, link_id TEXT
);
CREATE INDEX packets_machine ON packets (machine_id);

CREATE TRIGGER entries_insert BEFORE INSERT ON entries BEGIN
  SELECT RAISE(ABORT, 'entries are append-only: this line exists already') WHERE EXISTS (
    SELECT 1 FROM entries WHERE (log_id = NEW.log_id AND seq = NEW.seq)
      OR (log_id = NEW.log_id AND leaf_hash = NEW.leaf_hash) OR idempotency_key = NEW.idempotency_key);
  SELECT RAISE(ABORT, 'entries are append-only: this is not the next line of its log')
    WHERE NEW.seq IS NOT (SELECT COALESCE(MAX(seq) + 1, 0) FROM entries WHERE log_id = NEW.log_id);
END;
CREATE TRIGGER entries_update BEFORE UPDATE ON entries BEGIN SELECT RAISE(ABORT, 'entries are append-only'); END;
CREATE TRIGGER entries_delete BEFORE DELETE ON entries BEGIN SELECT RAISE(ABORT, 'entries are append-only'); END;
CREATE TRIGGER entry_parts_insert BEFORE INSERT ON entry_parts BEGIN
  SELECT RAISE(ABORT, 'entry parts are append-only: this part exists already') WHERE EXISTS (
    SELECT 1 FROM entry_parts WHERE log_id = NEW.log_id AND seq = NEW.seq AND name = NEW.name);
  SELECT RAISE(ABORT, 'entry parts are append-only: the next entry may only bring its own parts')
    WHERE NEW.seq IS NOT (SELECT MAX(seq) FROM entries WHERE log_id = NEW.log_id);
END;
CREATE TRIGGER entry_parts_update BEFORE UPDATE ON entry_parts BEGIN SELECT RAISE(ABORT, 'entry parts are append-only'); END;
CREATE TRIGGER entry_parts_delete BEFORE DELETE ON entry_parts BEGIN SELECT RAISE(ABORT, 'entry parts are append-only'); END;
CREATE TRIGGER checkpoints_insert BEFORE INSERT ON checkpoints BEGIN
  SELECT RAISE(ABORT, 'checkpoints are append-only: this size is signed already') WHERE EXISTS (
    SELECT 1 FROM checkpoints WHERE log_id = NEW.log_id AND size = NEW.size);
  SELECT RAISE(ABORT, 'checkpoints are append-only: this is not the log''s next size')
    WHERE NEW.size IS NOT (SELECT COALESCE(MAX(size), 0) + 1 FROM checkpoints WHERE log_id = NEW.log_id);
END;
CREATE TRIGGER checkpoints_update BEFORE UPDATE ON checkpoints BEGIN SELECT RAISE(ABORT, 'checkpoints are append-only'); END;
CREATE TRIGGER checkpoints_delete BEFORE DELETE ON checkpoints BEGIN SELECT RAISE(ABORT, 'checkpoints are append-only'); END;
CREATE TRIGGER tokens_insert BEFORE INSERT ON tokens BEGIN
  SELECT RAISE(ABORT, 'tokens are append-only: this token is stored already') WHERE EXISTS (
    SELECT 1 FROM tokens WHERE log_id = NEW.log_id AND size = NEW.size AND sha256 = NEW.sha256);
  SELECT RAISE(ABORT, 'tokens are append-only: there is no such checkpoint') WHERE NOT EXISTS (
    SELECT 1 FROM checkpoints WHERE log_id = NEW.log_id AND size = NEW.size);
END;
CREATE TRIGGER tokens_update BEFORE UPDATE ON tokens BEGIN SELECT RAISE(ABORT, 'tokens are append-only'); END;
CREATE TRIGGER tokens_delete BEFORE DELETE ON tokens BEGIN SELECT RAISE(ABORT, 'tokens are append-only'); END;
`;

export const first: Migration = {
  name: '0001-first',
  async up({ run }) {
    // Statements end with a semicolon at a line's end; trigger bodies are indented, so only `END;` closes them.
    for (const statement of splitStatements(statements)) await run(statement);
  },
};

/** Splits SQL into statements; a trigger runs to its `END;`. */
function splitStatements(sql: string): string[] {
  const found: string[] = [];
  let current: string[] = [];
  let isTrigger = false;
  for (const line of sql.split('\n')) {
    if (line.trim() === '' && current.length === 0) continue;
    if (current.length === 0) isTrigger = line.startsWith('CREATE TRIGGER');
    current.push(line);
    if (isTrigger ? /\bEND;\s*$/.test(line) : /;\s*$/.test(line)) {
      found.push(current.join('\n'));
      current = [];
    }
  }
  return found;
}
