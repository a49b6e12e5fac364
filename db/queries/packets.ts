import 'server-only';
import { Op } from 'sequelize';
import type { Transaction } from '../index';
import { relations } from '../models/people';
import { packets, type PacketRow } from '../models/proof';

export type { PacketRow };

export const findPacket = (id: string) => packets.find({ id });
export const insertPacket = (row: PacketRow, transaction: Transaction) => packets.insert(row, { transaction });

export async function isPacketNumberTaken(number: string, transaction: Transaction): Promise<boolean> {
  return (await packets.count({ number }, { transaction })) > 0;
}

export const updatePacket = (id: string, values: Partial<Omit<PacketRow, 'id'>>, transaction: Transaction) =>
  packets.update({ id }, values, { transaction });

/** Newest first. */
export const packetsOfMachine = (machineId: string) => packets.all({ machineId }, { order: [['createdAt', 'DESC']] });

/** Asked for and not finished, oldest first: what a server that stopped left behind. */
export const unfinishedPackets = () =>
  packets.all({ state: ['queued', 'building'] }, { order: [['createdAt', 'ASC']] });

/** How many packets a person asked for: those not finished, and those since an instant. */
export async function countPacketsAskedBy(personId: string, since: string) {
  const [waiting, sinceThen] = await Promise.all([
    packets.count({ createdBy: personId, state: ['queued', 'building'] }),
    packets.count({ createdBy: personId, createdAt: { [Op.gt]: since } }),
  ]);
  return { waiting, sinceThen };
}

/** The person who owns the machine now; of several, the first. */
export async function ownerOfMachine(machineId: string): Promise<string | null> {
  const [first] = await relations.all(
    { subjectKind: 'machine', subjectId: machineId, relation: 'owner', until: null },
    { order: [['since', 'ASC']], limit: 1 },
  );
  return first?.personId ?? null;
}
