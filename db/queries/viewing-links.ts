import 'server-only';
import { QueryTypes } from 'sequelize';
import { database, type Transaction } from '../index';
import { packets, viewingLinks, type PacketRow, type ViewingLinkRow } from '../models/proof';

export type { PacketRow, ViewingLinkRow };

export const findViewingLink = (id: string) => viewingLinks.find({ id });
export const findViewingLinkByTokenHash = (tokenHash: string) => viewingLinks.find({ tokenHash });

export const insertViewingLink = (row: ViewingLinkRow, transaction: Transaction) =>
  viewingLinks.insert(row, { transaction });

export const viewingLinksOfMachine = (machineId: string) =>
  viewingLinks.all({ machineId }, { order: [['createdAt', 'DESC']] });

export const updateViewingLink = (id: string, values: Partial<ViewingLinkRow>, transaction: Transaction) =>
  viewingLinks.update({ id }, values, { transaction });

/** A machine's packets that are ready and were built for exactly this stored scope, newest first. */
export const readyPacketsOf = (machineId: string, scope: string | null) =>
  packets.all({ machineId, scope, state: 'ready' }, { order: [['createdAt', 'DESC']] });

/**
 * When something of a machine's log, or of the shelf logs it draws from, was last erased, or an addendum or correction
 * to it struck, such as a blacked-out copy that covers too little. Null: never.
 */
export async function lastTakenBack(machineId: string): Promise<string | null> {
  const rows = await database().query<{ at: string | null }>(
    `WITH own AS (SELECT id FROM logs WHERE subject = 'machine' AND subject_id = :machineId),
      shown AS (SELECT id FROM own UNION SELECT shelf_log FROM draws WHERE machine_log IN (SELECT id FROM own))
    SELECT MAX(at) AS at FROM (
      SELECT erased_at AS at FROM erasures WHERE log_id IN (SELECT id FROM shown)
      UNION ALL
      SELECT s.sealed_at FROM entries s JOIN entries e ON e.log_id = s.log_id AND e.seq = s.refers_to_seq
       WHERE s.kind = 'strike' AND e.kind IN ('addendum', 'correction') AND s.log_id IN (SELECT id FROM shown))`,
    { type: QueryTypes.SELECT, replacements: { machineId } },
  );
  return rows[0]?.at ?? null;
}
