import 'server-only';
import { findLogOf } from '@/db/queries/logs';
import { machinesOf } from '@/db/queries/machines';
import type { MachineRow } from '@/db/models/machines';
import type { PersonRow } from '@/db/models/people';

export interface ListedMachine {
  id: string;
  /** `2022 Corvane Sorrel 1800`. */
  name: string;
  relation: 'owner' | 'helper';
  /** Some times of its log were injected: a demo. */
  timesInjected: boolean;
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
  return Promise.all(
    held.map(async ({ machine, relation }) => {
      const log = await findLogOf(machine.id);
      return { id: machine.id, name: machineName(machine), relation, timesInjected: log?.timesInjected ?? false };
    }),
  );
}
