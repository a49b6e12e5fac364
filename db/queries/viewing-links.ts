import 'server-only';
import type { Transaction } from '../index';
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

/** The newest packet that a reader of this machine's record may download. */
export async function newestReadyPacket(machineId: string): Promise<PacketRow | null> {
  const [newest] = await packets.all({ machineId, state: 'ready' }, { order: [['createdAt', 'DESC']], limit: 1 });
  return newest ?? null;
}
