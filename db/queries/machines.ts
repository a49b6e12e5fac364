import 'server-only';
import type { Transaction } from '../index';
import { machines, type MachineRow } from '../models/machines';
import { relations, type RelationRow } from '../models/people';

export function machineById(id: string, transaction?: Transaction): Promise<MachineRow | null> {
  return machines.find({ id }, transaction ? { transaction } : {});
}

/** The machines a person owns or helps with now, the first set up first. */
export async function machinesOf(
  personId: string,
): Promise<{ machine: MachineRow; relation: 'owner' | 'helper'; since: string }[]> {
  const held = await relations.all({ personId, subjectKind: 'machine', until: null });
  const found = await machines.all({ id: held.map((relation) => relation.subjectId), archivedAt: null });
  const list = found.flatMap((machine) => {
    const own = held.filter((relation) => relation.subjectId === machine.id);
    // A person may be both; the wider standing counts.
    const relation = own.find((one) => one.relation === 'owner') ?? own[0];
    if (relation === undefined || relation.relation === 'technician') return [];
    return [{ machine, relation: relation.relation, since: relation.since }];
  });
  return list.sort((a, b) => (a.machine.createdAt < b.machine.createdAt ? -1 : 1));
}

/** Who stands in a relation to a machine or a shelf now. */
export function relationsOf(
  subjectKind: 'machine' | 'shelf',
  subjectId: string,
  transaction?: Transaction,
): Promise<RelationRow[]> {
  const options = transaction ? { transaction } : {};
  return relations.all({ subjectKind, subjectId, until: null }, { order: [['since', 'ASC']], ...options });
}

export async function insertMachine(machine: MachineRow, owner: RelationRow, transaction: Transaction): Promise<void> {
  await machines.insert(machine, { transaction });
  await relations.insert(owner, { transaction });
}
