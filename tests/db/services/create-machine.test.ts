import { randomUUID } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { machines } from '@/db/models/machines';
import { shelvesOf } from '@/db/queries/shelves';
import { createMachine } from '@/lib/services/create-machine';
import { listMachines } from '@/lib/services/list-machines';
import { machineInput } from '@/lib/services/machine-input';
import { readHistory } from '@/lib/services/read-history';
import { makePerson, useTestDatabase } from '../../setup/test-database';

useTestDatabase();

const sorrel = {
  make: 'Corvane',
  model: 'Sorrel 1800',
  modelYear: '2022',
  kind: 'big V-twin tourer',
  vin: 'aaacrvsr 3na-000417',
  distanceUnit: '[mi_i]',
  timeZone: 'America/Denver',
  firstUseOn: '2022-06-14',
  firstUseOdometer: '4',
  why: 'new',
  warrantyTitle: 'Corvane limited warranty',
  warrantyStartsOn: '2022-06-14',
  warrantyMonths: '48',
  warrantyDistance: '24000',
} as const;
const inputWith = (values: Record<string, string> = {}) =>
  machineInput.parse({ machine: randomUUID(), ...sorrel, ...values });

describe('setting up a machine', () => {
  it('seals its identity and its terms, and gives the rider a shelf', async () => {
    const person = await makePerson();
    const { machine } = await createMachine({ person, input: inputWith() });
    const history = await readHistory(machine);
    expect(history.opening).toMatchObject({
      make: 'Corvane',
      kindOfMachine: 'big V-twin tourer',
      firstUse: { on: '2022-06-14', odometer: { value: '4', unit: '[mi_i]', instrument: 0 } },
      recordStarts: { on: '2022-06-14', why: 'new' },
    });
    expect(history.termsSeq).toBe(1);
    expect(history.terms?.schedule.map(({ item }) => item)).toContain('engine-oil');
    expect(history.terms?.warranty).toEqual([
      {
        term: 'factory',
        title: 'Corvane limited warranty',
        kind: 'factory',
        startsOn: '2022-06-14',
        months: '48',
        distances: [{ amount: '24000', unit: '[mi_i]' }],
        source: { kind: 'owner' },
      },
    ]);
    expect(await machines.find({ id: machine })).toMatchObject({ vin: 'AAACRVSR3NA000417', vinCheck: 'valid' });
    expect(await listMachines(person)).toMatchObject([{ name: '2022 Corvane Sorrel 1800', relation: 'owner' }]);
    expect(await shelvesOf(person.id)).toHaveLength(1);
  });

  it('is done once when the form is sent twice at the same time', async () => {
    const person = await makePerson();
    const input = inputWith();
    const [one, two] = await Promise.all([createMachine({ person, input }), createMachine({ person, input })]);
    expect(one).toEqual(two);
    expect((await readHistory(input.machine)).termsSeq).toBe(1);
    expect(await shelvesOf(person.id)).toHaveLength(1);
  });

  it('does not let somebody else take a machine by its id', async () => {
    const input = inputWith();
    await createMachine({ person: await makePerson(), input });
    const stranger = await makePerson({ name: 'Joost Vandersloot' });
    await expect(createMachine({ person: stranger, input })).rejects.toMatchObject({ code: 'not-found' });
  });

  it.each([
    ['a wrong check digit', { vin: '1G4AH59H55G118341' }, 'vin', /Position 9 is 5, but the other characters ask for 4/],
    ['a letter no VIN has', { vin: '1G4AH59H45G11834O' }, 'vin', /Position 17 is O/],
    ['neither VIN nor frame number', { vin: '' }, 'vin', /Enter the VIN, or the frame number/],
    ['a first use tomorrow', { firstUseOn: '2999-01-01' }, 'firstUseOn', /in the future/],
    ['a day that is none', { firstUseOn: '2023-02-29' }, 'firstUseOn', /not a day of the calendar/],
    ['an odometer that is no number', { firstUseOdometer: 'four' }, 'firstUseOdometer', /is not a number/],
    ['a kind nobody offered', { kind: 'constructor' }, 'kind', /Choose what kind/],
    ['a warranty without a limit', { warrantyMonths: '', warrantyDistance: '' }, 'warrantyMonths', /or both/],
    ['a machine bought used on no day', { why: 'bought-used' }, 'startsOn', /Enter the day this record starts/],
    [
      'a record that starts before first use',
      { why: 'bought-used', startsOn: '2022-06-13', startsOdometer: '9' },
      'startsOn',
      /cannot start before/,
    ],
  ] as [string, Record<string, string>, string, RegExp][])(
    'refuses %s beside its field',
    async (_, values, field, sentence) => {
      const person = await makePerson();
      const input = inputWith(values);
      const refusal = await createMachine({ person, input }).catch((error: unknown) => error);
      expect(refusal).toMatchObject({ code: 'invalid-input', fields: { [field]: expect.stringMatching(sentence) } });
      expect(await machines.find({ id: input.machine })).toBeNull();
    },
  );

  it('takes a VIN from outside North America whose check digit does not fit, and says it was not checked', async () => {
    const person = await makePerson();
    // Position 9 would have to be 3; the first letter puts it outside North America (ISO 3780).
    const { machine } = await createMachine({ person, input: inputWith({ vin: 'AAACRVSR4NA000417' }) });
    expect(await machines.find({ id: machine })).toMatchObject({ vinCheck: 'not checked' });
  });

  it('keeps names of every script', async () => {
    const person = await makePerson({ name: 'Ίμκε Вандерслот 🏍️' });
    const { machine } = await createMachine({ person, input: inputWith({ make: '机车', model: 'سوريل' }) });
    expect((await readHistory(machine)).opening).toMatchObject({ make: '机车', model: 'سوريل' });
  });
});
