import 'server-only';
import { machineById, relationsOf } from '@/db/queries/machines';
import { findPerson, type PersonRow } from '@/db/queries/people';
import type { MachineRow } from '@/db/models/machines';
import { authorise } from '@/lib/auth/guard';
import { warrantyState, type WarrantyState } from '@/lib/domain/warranty';
import { notFound } from '@/lib/errors';
import type { OpeningBody, Source, WarrantyTerm } from '@/lib/evidence/format';
import { now } from '@/lib/ports/clock';
import { machineName } from './list-machines';
import { readCheckpoint, type CheckpointView } from './read-checkpoint';
import { readHistory } from './read-history';

export interface MachineSettings {
  machine: Pick<
    MachineRow,
    'id' | 'make' | 'model' | 'modelYear' | 'kind' | 'vin' | 'frameNumber' | 'engineNumber' | 'timeZone'
  > & { name: string };
  vinCheck: 'valid' | 'not checked';
  opening: OpeningBody;
  warranty: (WarrantyState & { kind: WarrantyTerm['kind']; startsOn: string; source: Source })[];
  people: { name: string; relation: 'owner' | 'helper'; since: string }[];
  log: CheckpointView;
}

/** What a machine is, who has to do with it and where its record is kept, for one of its people. */
export async function readMachineSettings(options: { person: PersonRow; machine: string }): Promise<MachineSettings> {
  await authorise({ person: options.person, action: 'read-machine', machine: options.machine });
  const machine = await machineById(options.machine);
  if (machine === null) throw notFound('machine');
  const history = await readHistory(machine.id);
  const at = now().toISOString();
  const people = (await relationsOf('machine', machine.id)).map(async ({ personId, relation, since }) => {
    const name = (await findPerson(personId))?.name;
    return name === undefined || relation === 'technician' ? [] : [{ name, relation, since }];
  });
  const { id, make, model, modelYear, kind, vin, frameNumber, engineNumber, timeZone } = machine;
  return {
    machine: { id, make, model, modelYear, kind, vin, frameNumber, engineNumber, timeZone, name: machineName(machine) },
    vinCheck: machine.vinCheck === 'valid' ? 'valid' : 'not checked',
    opening: history.opening,
    warranty: (history.terms?.warranty ?? []).map((term) => ({
      ...warrantyState(term, history.readings, { now: at, zone: timeZone }),
      kind: term.kind,
      startsOn: term.startsOn,
      source: term.source,
    })),
    people: (await Promise.all(people)).flat(),
    log: await readCheckpoint(history.log),
  };
}
