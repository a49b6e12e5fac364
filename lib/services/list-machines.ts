import 'server-only';
import { machinesOf } from '@/db/queries/machines';
import type { MachineRow } from '@/db/models/machines';
import type { PersonRow } from '@/db/models/people';

export interface ListedMachine {
  id: string;
  /** `2022 Corvane Sorrel 1800`. */
  name: string;
  relation: 'owner' | 'helper';
}

/**
 * What a machine is called everywhere: model year, make, model.
 *
 * @example machineName({ modelYear: '2022', make: 'Corvane', model: 'Sorrel 1800' }) // '2022 Corvane Sorrel 1800'
 */
export function machineName(machine: Pick<MachineRow, 'modelYear' | 'make' | 'model'>): string {
  return [machine.modelYear, machine.make, machine.model].filter(Boolean).join(' ');
}

/** A person's machines, the first set up first. */
export async function listMachines(person: PersonRow): Promise<ListedMachine[]> {
  const held = await machinesOf(person.id);
  return held.map(({ machine, relation }) => ({ id: machine.id, name: machineName(machine), relation }));
}
