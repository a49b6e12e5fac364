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

/** A machine's packets that are ready and were built for exactly this stored scope, newest first. */
export const readyPacketsOf = (machineId: string, scope: string | null) =>
  packets.all({ machineId, scope, state: 'ready' }, { order: [['createdAt', 'DESC']] });
