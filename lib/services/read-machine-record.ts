import 'server-only';
import { findLog } from '@/db/queries/logs';
import { machineById } from '@/db/queries/machines';
import type { PersonRow } from '@/db/models/people';
import { can } from '@/lib/auth/access';
import { authorise, standingOf } from '@/lib/auth/guard';
import { notFound } from '@/lib/errors';
import { readRecord } from './read-record';
import type { RecordView } from './record-view';

export interface MachineRecord {
  record: RecordView;
  /** The machine's time zone: the one its record is read in. */
  zone: string;
  relation: 'owner' | 'helper';
  /** Ids of the shelves this person may open, by the id of the shelf's log. */
  shelfByLog: Map<string, string>;
}

/** A machine's record for one of its people. */
export async function readMachineRecord(options: { person: PersonRow; machine: string }): Promise<MachineRecord> {
  const { person } = options;
  const standing = await authorise({ person, action: 'read-record', machine: options.machine });
  const machine = await machineById(options.machine);
  if (machine === null) throw notFound('machine');
  const record = await readRecord({ machineId: machine.id });
  const shelves = await Promise.all(
    record.shelves.map(async ({ log }): Promise<[string, string][]> => {
      const shelf = (await findLog(log.id))?.subjectId;
      if (shelf === undefined) return [];
      return can('read-shelf', await standingOf(person, { shelf })) ? [[log.id, shelf]] : [];
    }),
  );
  return {
    record,
    zone: machine.timeZone,
    relation: standing.machine === 'owner' ? 'owner' : 'helper',
    shelfByLog: new Map(shelves.flat()),
  };
}
