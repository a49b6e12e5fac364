import { describe, expect, it } from 'vitest';
import { write } from '@/db/index';
import { eraseEntryPart } from '@/db/queries/erasures';
import { forSaleScope, narrowestScope, type Scope } from '@/lib/domain/scope';
import { openDisclosure } from '@/lib/evidence/disclosure';
import type { Bundle } from '@/lib/evidence/format';
import { verifyBundle } from '@/lib/evidence/verify';
import { summarise } from '@/lib/packet/summary';
import { openedWords } from '@/lib/packet/summary/opened';
import { bundleRecord } from '@/lib/services/bundle-record';
import { publishedKeys } from '@/lib/services/log-keys';
import { readRecord } from '@/lib/services/read-record';
import { requestPacket } from '@/lib/services/request-packet';
import { countersignatureBody, sealRecord } from '../setup/sealed-record';
import { makePerson, useTestDatabase } from '../setup/test-database';

useTestDatabase();

const about = { purpose: '', number: 'W-0001' };
const bundleOf = (machineId: string, scope: Scope) => bundleRecord({ machineId, scope, ...about });
const check = (text: string) => verifyBundle({ bundleText: text, key: publishedKeys()[0]?.verifierKey });
/** Every word a bundle opens. */
const wordsIn = ({ logs }: Bundle) =>
  logs
    .flatMap(({ entries }) => entries.flatMap(({ parts }) => parts))
    .map((disclosure) => JSON.stringify(openDisclosure(disclosure).value))
    .join('\n');
const openedBody = ({ entries }: Awaited<ReturnType<typeof readRecord>>, seq: number) => ({
  ...(entries[seq]?.body as object),
});
const only = (...seqs: number[]): Scope => ({ entries: { seqs }, closed: ['prices'] });

describe('a bundle of a scope', () => {
  it.each<[string, Scope, number]>([
    // Machine: 3 entries with 3 + 2 + 4 parts. Shelf: opening 2, unused purchase 4, drawn one 5 with its prices.
    ['the usual one', { closed: ['prices'] }, 2 + 4 + 1],
    ['every part', { closed: [] }, 2 + 4],
    ['for sale', forSaleScope, 2 + 4 + (1 + 1 + 1) + 3 + 1],
    // Without an opened draw the shelf’s log is not in the bundle at all.
    ['without the service', only(), 4],
    ['as little as there is', narrowestScope, 2 + 1 + 4],
  ])('is unchanged to the verifier and counts what is withheld: %s', async (_title, scope, withheld) => {
    const { machineId } = await sealRecord();
    const { text, bundle } = await bundleOf(machineId, scope);
    const finding = check(text);
    expect(finding.alterations).toEqual([]);
    expect(finding.outcome).toBe('unchanged');
    expect(finding.entries.reduce((sum, { withheldParts }) => sum + withheldParts.length, 0)).toBe(withheld);
    expect(bundle.logs[0]?.entries).toHaveLength(3);
    // Screen, packet and bundle are opened by the same rule, so they count the same.
    const record = await readRecord({ machineId, scope });
    const { opened } = summarise({ record, madeAt: '2026-05-01T00:00:00.000Z', zone: 'UTC' });
    expect(opened.partsWithheld).toBe(withheld);
  });

  it('for sale holds no name, no VIN and no price in anything it opens', async () => {
    const { machineId, machine, service, seal, rider } = await sealRecord();
    await seal(machine.log, 'countersignature', { body: { ...countersignatureBody, invitedBy: rider.id } }, service);
    const { bundle, text } = await bundleOf(machineId, forSaleScope);
    const words = wordsIn(bundle);
    expect(words).toContain('Engine oil and filter');
    expect(words).toContain('Halyard Cycle Works');
    // In quotes, as a price is written: bare figures are found in hashes, too, now and then.
    for (const secret of [rider.name, 'AAACRVSR3NA000417', '"7194"', '"1999"']) {
      expect(words).not.toContain(secret);
      expect(text).not.toContain(secret);
    }
    const everything = wordsIn((await bundleOf(machineId, { closed: [] })).bundle);
    expect(everything).toContain('"7194"');
    expect(check(text).outcome).toBe('unchanged');
  });

  it('for sale keeps a text closed that says what was erased: whose name, or the VIN', async () => {
    const { machineId, machine, service, seal, rider } = await sealRecord();
    const joost = await makePerson({ name: 'Joost Vandersloot', email: 'joost@witnessmark.example' });
    const performedBy = [{ person: joost.id, capacity: 'helper' as const }];
    const body = { ...openedBody(await readRecord({ machineId }), service.seq), performedBy };
    const people = [{ person: joost.id, name: joost.name }];
    const helped = await seal(machine.log, 'service', {
      author: { person: rider.id, name: rider.name, role: 'owner', people },
      body,
    });
    for (const text of ['Joost Vandersloot held the lamp.', 'The plate reads AAACRVSR3NA000417.']) {
      await seal(machine.log, 'addendum', { body: { text } }, helped);
    }
    const said = async () => wordsIn((await bundleOf(machineId, forSaleScope)).bundle);
    expect(await said()).not.toMatch(/held the lamp|AAACRVSR3NA000417/);
    const erased = {
      logId: machine.log,
      erasedAt: '2026-06-01T00:00:00.000Z',
      erasedBy: rider.id,
      recordedSeq: helped.seq + 1,
    };
    await write(async (transaction) => {
      await eraseEntryPart({ ...erased, seq: helped.seq, name: 'author' }, transaction);
      await eraseEntryPart({ ...erased, seq: 0, name: 'identity' }, transaction);
    });
    expect(await said()).not.toMatch(/held the lamp|AAACRVSR3NA000417/);
  });

  it('keeps a countersignature of an earlier version closed where names are: it has one in its body', async () => {
    const { machineId, machine, service, seal } = await sealRecord();
    const { seq } = await seal(machine.log, 'countersignature', { body: countersignatureBody }, service);
    const sale = await readRecord({ machineId, scope: forSaleScope });
    expect(sale.entries[seq]).toMatchObject({
      title: `Countersignature of entry ${service.seq}, withheld`,
      body: null,
    });
    expect(sale.entries[service.seq]?.countersignatures).toEqual([]);
    const usual = await readRecord({ machineId });
    expect(usual.entries[seq]?.body).toMatchObject({ invitedBy: 'Imke Vandersloot' });
  });

  it('keeps an entry closed whose text spells out what stays closed', async () => {
    const { machineId, machine, service, seal, rider } = await sealRecord();
    const named = await seal(machine.log, 'addendum', { body: { text: `${rider.name} looked again.` } }, service);
    const numbered = await seal(machine.log, 'addendum', { body: { text: 'Frame aaacrvsr3na000417.' } }, service);
    const { entries } = await readRecord({ machineId, scope: { closed: ['names'] } });
    expect([entries[named.seq]?.body, entries[numbered.seq]?.body]).toEqual([null, expect.anything()]);
    const without = await readRecord({ machineId, scope: { closed: ['vin'] } });
    expect([without.entries[named.seq]?.body, without.entries[numbered.seq]?.body]).toEqual([expect.anything(), null]);
  });
});

describe('people in a record', () => {
  it('who invited a shop is named where an author part says it, and called the owner where none does', async () => {
    const { machineId, machine, service, seal, rider } = await sealRecord();
    const body = { ...countersignatureBody, invitedBy: rider.id };
    await seal(machine.log, 'countersignature', { body }, service);
    const invitedBy = async (scope: Scope) => {
      const { entries } = await readRecord({ machineId, scope });
      const [one] = entries[service.seq]?.countersignatures ?? [];
      return one?.body.invitedBy;
    };
    expect(await invitedBy({ closed: [] })).toBe(rider.name);
    expect(await invitedBy({ closed: ['names'] })).toBe('the owner');
  });

  it('who did the work is withheld by name and told by capacity', async () => {
    const { machineId, service } = await sealRecord();
    const { entries } = await readRecord({ machineId, scope: { closed: ['names'] } });
    expect(entries[service.seq]?.body).toMatchObject({ performedBy: [{ person: 'Name withheld', capacity: 'owner' }] });
  });
});

describe('a partial record', () => {
  it('says how much is opened, gives no verdict on intervals, and tells nothing of what is closed', async () => {
    const { machineId, machine, seal, terms } = await sealRecord();
    const schedule = [
      {
        item: 'engine-oil', title: 'Engine oil', action: 'replace', source: { kind: 'manual', title: 'Manual' },
        interval: { distances: [{ amount: '5000', unit: '[mi_i]' }] },
      },
    ]; // prettier-ignore
    const warranty = [
      {
        term: 'factory', title: 'Factory warranty', kind: 'factory', startsOn: '2026-04-01', months: '24',
        distances: [{ amount: '20000', unit: '[mi_i]' }], source: { kind: 'manual', title: 'Booklet' },
      },
    ]; // prettier-ignore
    await seal(machine.log, 'terms', { body: { schedule, fluidPoints: [], fasteners: [], parts: [], warranty } });
    const oil = (date: string, value: string) => ({
      termsSeq: terms.seq, recorded: 'at-the-time', finishedAt: { date, time: '10:00', zone: 'UTC' },
      odometer: { value, unit: '[mi_i]', instrument: 0 }, performedBy: [], title: `Oil at ${value}`,
      tasks: [
        { key: 'engine-oil', title: 'Oil', scheduleItem: 'engine-oil', action: 'replace', steps: [], inspections: [],
          fills: [], torques: [], parts: [], levelChecks: [] },
      ],
      checks: [], statement: '',
    }); // prettier-ignore
    const first = await seal(machine.log, 'service', { body: oil('2026-05-01', '18900') });
    await seal(machine.log, 'service', { body: oil('2027-05-01', '23456') });
    const at = { madeAt: '2027-06-01T00:00:00.000Z', zone: 'UTC' };

    const whole = summarise({ record: await readRecord({ machineId }), ...at });
    expect(whole.items[0]).toMatchObject({ isJudged: true, summary: { done: 2 } });
    expect(whole.warranty[0]?.hasEnded).toBe(true);

    const record = await readRecord({ machineId, scope: only(first.seq) });
    const part = summarise({ record, ...at });
    expect(openedWords(part.opened)).toMatch(/^4 of 6 entries opened, \d+ parts withheld$/);
    expect(part.headline).toBe('4 of 6 entries are opened here; what is withheld is not judged.');
    expect(part.items[0]).toMatchObject({
      isJudged: false,
      intervals: [],
      summary: { done: 1, late: 0, sentence: 'not judged: 2 entries withheld' },
    });
    expect(part.warranty[0]).toMatchObject({ hasEnded: false });
    expect(part.warranty[0]?.sentence).toContain('Whether the distance is reached is not judged: 2 entries withheld.');
    expect(part.gaps[0]).toMatchObject({ isWhole: true });
    expect(part.now?.value).toBe('18900');
    expect(JSON.stringify([part, record.entries])).not.toContain('"23456"');
  });
});

describe('a purpose that would tell what stays closed', () => {
  it('is refused next to its field', async () => {
    const { machineId, rider } = await sealRecord();
    const { relations } = await import('@/db/models/people');
    const since = new Date().toISOString();
    await relations.insert({
      id: crypto.randomUUID(), personId: rider.id, subjectKind: 'machine', subjectId: machineId, relation: 'owner',
      since, until: null,
    }); // prettier-ignore
    const ask = (purpose: string) =>
      requestPacket({ person: rider, machineId, input: { purpose }, scope: forSaleScope });
    await expect(ask(`For a buyer of ${rider.name}`)).rejects.toMatchObject({
      fields: { purpose: expect.stringContaining('names a person') },
    });
    await expect(ask('VIN AAACRVSR3NA000417')).rejects.toMatchObject({
      fields: { purpose: expect.stringContaining('the VIN') },
    });
  });
});
