import { randomUUID } from 'node:crypto';
import { relations, type PersonRow } from '@/db/models/people';
import { shelvesOf } from '@/db/queries/shelves';
import { appendDraftChanges } from '@/lib/services/append-draft-changes';
import { createMachine } from '@/lib/services/create-machine';
import { machineInput } from '@/lib/services/machine-input';
import { startDraft } from '@/lib/services/start-draft';
import { makePerson } from '../../setup/test-database';

/** A rider with the Sorrel and a shelf, as these tests begin. */
export async function riderWithMachine(): Promise<{ person: PersonRow; machine: string; shelf: string }> {
  const person = await makePerson({ timeZone: 'America/Denver' });
  const input = machineInput.parse({
    machine: randomUUID(),
    make: 'Corvane',
    model: 'Sorrel 1800',
    modelYear: '2022',
    kind: 'big V-twin tourer',
    vin: 'AAACRVSR3NA000417',
    distanceUnit: '[mi_i]',
    timeZone: 'America/Denver',
    firstUseOn: '2022-06-14',
    firstUseOdometer: '4',
    why: 'new',
  });
  const { machine } = await createMachine({ person, input });
  const [shelf] = await shelvesOf(person.id);
  return { person, machine, shelf: shelf!.id };
}

/** A draft with these fields, as a device would send them. */
export async function draftWith(options: {
  person: PersonRow;
  kind: 'worksheet' | 'receipt' | 'addendum';
  subject: string;
  refersToSeq?: number;
  fields: Record<string, string>;
}): Promise<string> {
  const { person, kind, subject, fields, refersToSeq } = options;
  const id = randomUUID();
  await startDraft({ person, input: { id, kind, subject, refersToSeq } });
  await typeInto({ person, draft: id, fields });
  return id;
}

let clock = Date.parse('2026-04-18T10:00:00.000Z');
export async function typeInto(options: {
  person: PersonRow;
  draft: string;
  fields: Record<string, string>;
}): Promise<void> {
  clock += 1000;
  const deviceAt = new Date(clock).toISOString();
  const changes = Object.entries(options.fields).map(([field, value]) => ({
    id: randomUUID(),
    field,
    value,
    deviceAt,
  }));
  await appendDraftChanges({ person: options.person, draftId: options.draft, input: { changes } });
}

export const receiptFields = {
  'boughtOn/date': '2025-10-11',
  'boughtOn/time': '09:41',
  zone: 'America/Denver',
  'supplier/name': 'Brandywell Powersports',
  currency: 'USD',
  total: '89,94',
  'lines/a/position': '1',
  'lines/a/kind': 'fluid',
  'lines/a/product': 'Fernhill V-twin 20W-50',
  'lines/a/grade': 'SAE 20W-50',
  'lines/a/containers': '6',
  'lines/a/containerSize/amount': '1',
  'lines/a/containerSize/unit': '[qt_us]',
  'lines/a/price': '12.99',
  'lines/b/position': '2',
  'lines/b/kind': 'part',
  'lines/b/product': 'Tarn oil filter',
  'lines/b/partNumber': 'TN-417',
  'lines/b/quantity': '1',
};

/** An oil change of 4.25 and 0.25 US qt out of line 1, and the filter out of line 2. */
export function oilChange(purchase: { log: string; seq: number }): Record<string, string> {
  const lot = (line: number) => `${purchase.log}:${purchase.seq}:${line}`;
  return {
    'startedAt/date': '2025-10-19',
    'startedAt/time': '14:10',
    'finishedAt/date': '2025-10-19',
    'finishedAt/time': '15:53',
    zone: 'America/Denver',
    'odometer/value': '10238',
    'odometer/unit': '[mi_i]',
    'tasks/t1/key': 'engine-oil',
    'tasks/t1/steps/drain': '2025-10-19T20:20:00.000Z',
    'tasks/t1/fills/f1/point': 'engine',
    'tasks/t1/fills/f1/fillKind': 'wet',
    'tasks/t1/fills/f1/amounts/a1/amount': '4,25',
    'tasks/t1/fills/f1/amounts/a1/unit': '[qt_us]',
    'tasks/t1/fills/f1/amounts/a1/step': 'first',
    'tasks/t1/fills/f1/amounts/a1/position': '1',
    'tasks/t1/fills/f1/amounts/a2/amount': '0.25',
    'tasks/t1/fills/f1/amounts/a2/unit': '[qt_us]',
    'tasks/t1/fills/f1/amounts/a2/step': 'top-up',
    'tasks/t1/fills/f1/amounts/a2/position': '2',
    'tasks/t1/fills/f1/draws/d1/lot': lot(1),
    'tasks/t1/fills/f1/draws/d1/amount': '4.5',
    'tasks/t1/fills/f1/draws/d1/unit': '[qt_us]',
    'tasks/t1/torques/q1/fastener': 'engine-drain',
    'tasks/t1/torques/q1/amount': '18',
    'tasks/t1/torques/q1/unit': '[ft_i].[lbf_av]',
    'tasks/t1/torques/q1/toolName': 'Click wrench 5 to 60',
    'tasks/t1/parts/p1/name': 'Oil filter',
    'tasks/t1/parts/p1/quantity': '1',
    'tasks/t1/parts/p1/draws/d1/lot': lot(2),
    'tasks/t1/parts/p1/draws/d1/amount': '1',
    'tasks/t1/parts/p1/draws/d1/unit': '{piece}',
  };
}

export async function lendAHand(machine: string): Promise<PersonRow> {
  const helper = await makePerson({ name: 'Joost Vandersloot' });
  await relations.insert({
    id: randomUUID(),
    personId: helper.id,
    subjectKind: 'machine',
    subjectId: machine,
    relation: 'helper',
    since: '2025-01-01T00:00:00.000Z',
    until: null,
  });
  return helper;
}
