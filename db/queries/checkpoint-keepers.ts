import 'server-only';
import { Op, QueryTypes } from 'sequelize';
import { database, type Transaction } from '../index';
import { checkpointKeepers, type CheckpointKeeperRow, checkpointMails, type CheckpointMailRow } from '../models/proof';

interface Within {
  transaction?: Transaction;
}

export const findKeeper = (id: string, within: Within = {}) => checkpointKeepers.find({ id }, within);
export const findKeeperByTokenHash = (tokenHash: string) => checkpointKeepers.find({ tokenHash });
export const insertKeeper = (row: CheckpointKeeperRow, transaction: Transaction) =>
  checkpointKeepers.insert(row, { transaction });
export const updateKeeper = (id: string, values: Partial<CheckpointKeeperRow>, transaction: Transaction) =>
  checkpointKeepers.update({ id }, values, { transaction });

/** Those that keep checkpoints of a machine or were asked to, the oldest first. */
export const keepersOfMachine = (machineId: string, within: Within = {}) =>
  checkpointKeepers.all({ machineId, endedAt: null }, { order: [['addedAt', 'ASC']], ...within });

/** Whether anybody keeps the checkpoints of a log, or of any. */
export async function keepsAnybody(logId: string | null): Promise<boolean> {
  const rows = await database().query(
    `SELECT 1 FROM checkpoint_keepers k JOIN logs l ON l.subject_id = k.machine_id
      WHERE k.confirmed_at IS NOT NULL AND k.ended_at IS NULL AND (? IS NULL OR l.id = ?) LIMIT 1`,
    { replacements: [logId, logId], type: QueryTypes.SELECT },
  );
  return rows.length > 0;
}

/** How often an address was asked about a machine since an instant. */
export const countAsked = (machineId: string, email: string, since: string, within: Within = {}) =>
  checkpointKeepers.count({ machineId, email, addedAt: { [Op.gt]: since } }, within);

/** How often an address was asked since an instant, about whatever machine and by whomever. */
export const countAskedOf = (email: string, since: string, within: Within = {}) =>
  checkpointKeepers.count({ email, addedAt: { [Op.gt]: since } }, within);

/** How many addresses a person has asked since an instant. */
export const countAskedBy = (personId: string, since: string, within: Within = {}) =>
  checkpointKeepers.count({ addedBy: personId, addedAt: { [Op.gt]: since } }, within);

/**
 * Puts a mail into the queue for every checkpoint that was sealed since its keeper said yes and has none yet. Made from
 * what is stored, so that a checkpoint whose server died after sealing it is mailed at the next start.
 */
export async function queueCheckpointMails(at: string, transaction: Transaction): Promise<void> {
  await database().query(
    `INSERT INTO checkpoint_mails (keeper_id, log_id, size, attempts, next_try_at)
      SELECT k.id, c.log_id, c.size, 0, ? FROM checkpoint_keepers k
        JOIN logs l ON l.subject_id = k.machine_id
        JOIN checkpoints c ON c.log_id = l.id AND c.created_at > k.confirmed_at
      WHERE k.ended_at IS NULL AND k.confirmed_at IS NOT NULL AND c.size > COALESCE(
        (SELECT MAX(m.size) FROM checkpoint_mails m WHERE m.keeper_id = k.id AND m.log_id = c.log_id), 0)`,
    { replacements: [at], type: QueryTypes.INSERT, transaction },
  );
}

/** Mails whose try has come, the smallest size first. */
export const dueCheckpointMails = (at: string, limit: number) =>
  checkpointMails.all(
    { sentAt: null, nextTryAt: { [Op.lte]: at } },
    { order: [['nextTryAt', 'ASC'], ['size', 'ASC']], limit }, // prettier-ignore
  );

export type MailKey = Pick<CheckpointMailRow, 'keeperId' | 'logId' | 'size'>;

/** Marks a mail as sent, once: false if it is already. */
export const claimCheckpointMail = async (key: MailKey, sentAt: string, transaction: Transaction) =>
  (await checkpointMails.update({ ...key, sentAt: null }, { sentAt }, { transaction })) === 1;

export const updateCheckpointMail = (key: MailKey, values: Partial<CheckpointMailRow>, transaction: Transaction) =>
  checkpointMails.update(key, values, { transaction });

export const countSentTo = (keeperId: string, since: string) =>
  checkpointMails.count({ keeperId, sentAt: { [Op.gt]: since } });

/** Of several that wait, the newest says all that the older ones would. */
export const dropOlderWaiting = ({ keeperId, logId, size }: MailKey, transaction: Transaction) =>
  checkpointMails.remove({ keeperId, logId, size: { [Op.lt]: size }, sentAt: null }, { transaction });
export const newestWaiting = async (keeperId: string) =>
  (await checkpointMails.all({ keeperId, sentAt: null }, { order: [['size', 'DESC']], limit: 1 }))[0] ?? null;

export const removeCheckpointMail = (key: MailKey, transaction: Transaction) =>
  checkpointMails.remove({ ...key, sentAt: null }, { transaction });

/** What was sent last to a keeper, for its owner. */
export const lastSentTo = async (keeperId: string) =>
  (await checkpointMails.all({ keeperId, sentAt: { [Op.not]: null } }, { order: [['size', 'DESC']], limit: 1 }))[0] ??
  null;
