import type { Migration } from '../migrate';

/**
 * Closes what the first schema left open to a database shell: parts of an entry that is under a checkpoint already,
 * draws (balances of lots are counted from them), and what a log is. `draws` and `logs` have rowids, which REPLACE may
 * name to delete another row, so their triggers ask for that as well.
 */
const statements = [
  `CREATE TRIGGER entry_parts_signed BEFORE INSERT ON entry_parts BEGIN
    SELECT RAISE(ABORT, 'entry parts are append-only: this entry is signed already') WHERE EXISTS (
      SELECT 1 FROM checkpoints WHERE log_id = NEW.log_id AND size = NEW.seq + 1);
  END`,
  `CREATE TRIGGER draws_insert BEFORE INSERT ON draws BEGIN
    SELECT RAISE(ABORT, 'draws are append-only: this draw exists already') WHERE EXISTS (
      SELECT 1 FROM draws WHERE rowid = NEW.rowid
        OR (machine_log = NEW.machine_log AND entry_seq = NEW.entry_seq AND position = NEW.position));
  END`,
  `CREATE TRIGGER draws_update BEFORE UPDATE ON draws BEGIN SELECT RAISE(ABORT, 'draws are append-only'); END`,
  `CREATE TRIGGER draws_delete BEFORE DELETE ON draws BEGIN SELECT RAISE(ABORT, 'draws are append-only'); END`,
  `CREATE TRIGGER logs_insert BEFORE INSERT ON logs BEGIN
    SELECT RAISE(ABORT, 'logs are append-only: this log exists already') WHERE EXISTS (
      SELECT 1 FROM logs WHERE rowid = NEW.rowid OR id = NEW.id OR subject_id = NEW.subject_id);
  END`,
  `CREATE TRIGGER logs_update BEFORE UPDATE OF id, subject, subject_id, origin, key_name, created_at ON logs BEGIN
    SELECT RAISE(ABORT, 'logs are append-only: what a log is never changes');
  END`,
  `CREATE TRIGGER logs_delete BEFORE DELETE ON logs BEGIN SELECT RAISE(ABORT, 'logs are append-only'); END`,
];

export const appendOnlyFurther: Migration = {
  name: '0002-append-only-further',
  async up({ run }) {
    for (const statement of statements) await run(statement);
  },
};
