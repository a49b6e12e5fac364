import { randomUUID } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { draws } from '@/db/models/logs';
import { files, uploads } from '@/db/models/drafts';
import { foldChanges } from '@/lib/domain/worksheet';
import { confirmReceipt } from '@/lib/services/confirm-receipt';
import { readBench } from '@/lib/services/read-bench';
import { readDraft } from '@/lib/services/read-draft';
import { readGarage } from '@/lib/services/read-garage';
import { readRecord } from '@/lib/services/read-record';
import { readHistory } from '@/lib/services/read-history';
import { readShelfLots } from '@/lib/services/read-shelf-lots';
import { reviewWorksheet } from '@/lib/services/review-worksheet';
import { sealWorksheet } from '@/lib/services/seal-worksheet';
import { makePerson, useTestDatabase } from '../../setup/test-database';
import { draftWith, lendAHand, oilChange, receiptFields, riderWithMachine, typeInto } from './garage-story';

useTestDatabase();

async function riderWithOil() {
  const rider = await riderWithMachine();
  const { person, shelf } = rider;
  const receipt = await draftWith({ person, kind: 'receipt', subject: shelf, fields: receiptFields });
  const purchase = await confirmReceipt({ person, draftId: receipt });
  const begin = (fields: Record<string, string> = {}) =>
    draftWith({
      person,
      kind: 'worksheet',
      subject: rider.machine,
      fields: { ...oilChange(purchase), ...fields },
    });
  const balance = async (line: number) => {
    const { lots } = await readShelfLots({ person, shelf });
    return lots.find((lot) => lot.seq === purchase.seq && lot.line === line)?.balance;
  };
  return { ...rider, receipt, purchase, begin, balance };
}

describe('confirming a receipt', () => {
  it('seals the purchase at once, with its lots whole', async () => {
    const { person, shelf, purchase } = await riderWithOil();
    expect(purchase.seq).toBe(1);
    const { lots } = await readShelfLots({ person, shelf });
    expect(lots.map(({ product, balance, supplier }) => ({ product, balance, supplier }))).toEqual([
      {
        product: 'Fernhill V-twin 20W-50',
        balance: { amount: '6', unit: '[qt_us]' },
        supplier: 'Brandywell Powersports',
      },
      { product: 'Tarn oil filter', balance: { amount: '1', unit: '{piece}' }, supplier: 'Brandywell Powersports' },
    ]);
  });

  it('is done once however often it is asked for', async () => {
    const { person, shelf } = await riderWithMachine();
    const draftId = await draftWith({ person, kind: 'receipt', subject: shelf, fields: receiptFields });
    const answers = await Promise.all([1, 2, 3].map(() => confirmReceipt({ person, draftId })));
    expect(new Set(answers.map(({ seq }) => seq))).toEqual(new Set([1]));
    expect(answers.filter(({ isNew }) => isNew)).toHaveLength(1);
    expect((await readDraft({ person, draftId })).draft).toMatchObject({ state: 'sealed', sealedSeq: 1 });
  });

  it('names every field that keeps it from being confirmed, and seals nothing', async () => {
    const { person, shelf } = await riderWithMachine();
    const fields = { ...receiptFields, 'boughtOn/date': '2999-01-01', 'lines/b/quantity': 'one' };
    const draftId = await draftWith({ person, kind: 'receipt', subject: shelf, fields });
    await expect(confirmReceipt({ person, draftId })).rejects.toMatchObject({
      code: 'invalid-input',
      fields: {
        'boughtOn/date': expect.stringContaining('in the future'),
        'lines/b/quantity': expect.stringContaining('whole number'),
      },
    });
    expect((await readShelfLots({ person, shelf })).lots).toEqual([]);
  });
});

describe('a worksheet on its way into the record', () => {
  it('is sealed as it was reviewed: fills, torques, draws and checks', async () => {
    const { person, machine, begin, balance, purchase } = await riderWithOil();
    const draftId = await begin();
    const review = await reviewWorksheet({ person, draftId });
    expect(review.problems).toEqual([]);
    expect(review.nextSeq).toBe(2);
    const sealed = await sealWorksheet({ person, draftId, reviewed: review.composed!.fingerprint });
    expect(sealed).toMatchObject({ machine, seq: 2, isNew: true });

    const [service] = (await readHistory(machine)).services;
    const { checks: shownChecks, ...shown } = review.composed!.body!;
    const { checks, ...body } = service!.body;
    expect(body).toEqual(shown);
    expect(checks.map(({ key }) => key)).toEqual(shownChecks.map(({ key }) => key));
    expect(body).toMatchObject({
      termsSeq: 1,
      odometer: { value: '10238', unit: '[mi_i]', instrument: 0 },
      performedBy: [{ person: person.id, capacity: 'owner' }],
    });
    const [task] = body.tasks;
    expect(task?.fills[0]?.amounts).toEqual([
      { amount: '4.25', unit: '[qt_us]', step: 'first' },
      { amount: '0.25', unit: '[qt_us]', step: 'top-up' },
    ]);
    expect(task?.fills[0]?.draws[0]).toMatchObject({
      purchase: { log: purchase.log, seq: 1 },
      balanceBefore: { amount: '6', unit: '[qt_us]' },
      balanceAfter: { amount: '1.5', unit: '[qt_us]' },
    });
    expect(task?.torques[0]).toMatchObject({ fastenerTitle: 'Engine drain plug', amount: '18' });
    expect(checks.find(({ key }) => key === 'receipts')).toMatchObject({ result: 'met' });
    expect(checks.find(({ key }) => key === 'odometer-photographed')).toMatchObject({ result: 'gap' });
    expect(await balance(1)).toEqual({ amount: '1.5', unit: '[qt_us]' });
    expect(await balance(2)).toEqual({ amount: '0', unit: '{piece}' });
    expect(await draws.count({ machineLog: sealed.log, entrySeq: 2 })).toBe(2);
  });

  it('is sealed once: a retry gets the first answer, and so do ten at the same time', async () => {
    const { person, begin, balance } = await riderWithOil();
    const draftId = await begin();
    const answers = await Promise.all(Array.from({ length: 10 }, () => sealWorksheet({ person, draftId })));
    answers.push(await sealWorksheet({ person, draftId }));
    expect(new Set(answers.map(({ seq }) => seq))).toEqual(new Set([2]));
    expect(answers.filter(({ isNew }) => isNew)).toHaveLength(1);
    expect(await balance(1)).toEqual({ amount: '1.5', unit: '[qt_us]' });
  });

  it('cannot take from a lot what another worksheet took at the same moment', async () => {
    const { person, begin, balance } = await riderWithOil();
    const noFilter = { 'tasks/t1/parts/p1/removed': 'yes' };
    const ids = [await begin(noFilter), await begin(noFilter)];
    const answers = await Promise.allSettled(ids.map((draftId) => sealWorksheet({ person, draftId })));
    const refused = answers.filter((answer) => answer.status === 'rejected');
    expect(answers.filter((answer) => answer.status === 'fulfilled')).toHaveLength(1);
    expect(refused).toHaveLength(1);
    expect(refused[0]?.reason).toMatchObject({
      code: 'invalid-input',
      fields: {
        'tasks/t1/fills/f1/draws/d1/amount': expect.stringContaining('4.5 US qt is more than the 1.5 US qt left'),
      },
    });
    expect(await balance(1)).toEqual({ amount: '1.5', unit: '[qt_us]' });
  });

  it('seals what no lot covers as a gap', async () => {
    const { person, machine, begin } = await riderWithOil();
    const draftId = await begin({ 'tasks/t1/fills/f1/draws/d1/amount': '3' });
    await sealWorksheet({ person, draftId });
    const [service] = (await readHistory(machine)).services;
    expect(service?.body.tasks[0]?.fills[0]?.uncovered).toEqual({ amount: '1.5', unit: '[qt_us]' });
    expect(service?.body.checks.find(({ key }) => key === 'receipts')).toMatchObject({ result: 'gap' });
  });

  it('is not sealed when it changed after it was read', async () => {
    const { person, begin } = await riderWithOil();
    const draftId = await begin();
    const { composed } = await reviewWorksheet({ person, draftId });
    await typeInto({ person, draft: draftId, fields: { 'odometer/value': '10239' } });
    const late = sealWorksheet({ person, draftId, reviewed: composed!.fingerprint });
    await expect(late).rejects.toMatchObject({ code: 'conflict' });
    expect((await readDraft({ person, draftId })).draft.state).toBe('open');
  });

  it('may be filled in by a helper, who is named in the author part alone, but only an owner seals', async () => {
    const { person, machine, begin } = await riderWithOil();
    const helper = await lendAHand(machine);
    const draftId = await begin();
    await typeInto({ person: helper, draft: draftId, fields: { notes: 'Magnet clean.' } });
    await expect(sealWorksheet({ person: helper, draftId })).rejects.toMatchObject({ code: 'forbidden' });
    await sealWorksheet({ person, draftId });
    const [service] = (await readHistory(machine)).services;
    expect(JSON.stringify(service?.body)).not.toContain('Vandersloot');
    const { entries } = await readRecord({ machineId: machine });
    const entry = entries.at(-1);
    expect(entry?.author?.people).toEqual([{ person: helper.id, name: 'Joost Vandersloot' }]);
    // People read names all the same.
    expect(entry?.kind === 'service' && entry.body?.performedBy).toEqual(
      expect.arrayContaining([
        { person: 'Imke Vandersloot', capacity: 'owner' },
        { person: 'Joost Vandersloot', capacity: 'helper' },
      ]),
    );
  });

  it('does not exist for anybody else', async () => {
    const { machine, begin } = await riderWithOil();
    const draftId = await begin();
    const stranger = await makePerson({ name: 'Teodora Lindqvist' });
    const refusal = { code: 'not-found' };
    await expect(sealWorksheet({ person: stranger, draftId })).rejects.toMatchObject(refusal);
    await expect(reviewWorksheet({ person: stranger, draftId })).rejects.toMatchObject(refusal);
    await expect(readBench({ person: stranger, machine })).rejects.toMatchObject(refusal);
    expect((await readGarage({ person: stranger })).machines).toEqual([]);
  });

  it.each([
    ['a day that has not come', { 'finishedAt/date': '2999-01-01' }, 'finishedAt/date'],
    ['a torque without a figure', { 'tasks/t1/torques/q1/amount': '' }, 'tasks/t1/torques/q1/amount'],
    [
      'a lot of somebody else',
      { 'tasks/t1/fills/f1/draws/d1/lot': `${randomUUID()}:1:1` },
      'tasks/t1/fills/f1/draws/d1/lot',
    ],
    ['a photo still on the phone', { 'photos/u1/role': 'odometer' }, 'photos/u1'],
  ])('is not sealed with %s, and the review leads to the field', async (_, fields, field) => {
    const { person, begin } = await riderWithOil();
    const draftId = await begin(fields);
    const { problems } = await reviewWorksheet({ person, draftId });
    expect(problems.map((problem) => problem.field)).toContain(field);
    expect(problems[0]?.href).toMatch(new RegExp(`^/garage#worksheet/${draftId}/(times|t1|summary)$`));
    await expect(sealWorksheet({ person, draftId })).rejects.toMatchObject({ code: 'invalid-input' });
  });

  it('carries texts of every script into the entry as they were typed', async () => {
    const { person, machine, begin } = await riderWithOil();
    const notes = 'Λάδι · Масло · 机油 · زيت المحرك · 🏍️👩‍🔧';
    const draftId = await begin({ notes, title: 'Ölwechsel 机油', statement: 'Я сделал это сам. 我自己做的。' });
    await sealWorksheet({ person, draftId });
    const [service] = (await readHistory(machine)).services;
    expect(service?.body).toMatchObject({ title: 'Ölwechsel 机油', statement: 'Я сделал это сам. 我自己做的。' });
    expect(foldChanges((await readDraft({ person, draftId })).changes).notes).toBe(notes);
  });

  it('binds its pictures with role, caption and shared copy, without the removed ones', async () => {
    const { person, machine, begin } = await riderWithOil();
    const draftId = await begin();
    const [kept, removed] = [randomUUID(), randomUUID()];
    const hashes = { original: 'a1'.repeat(32), copy: 'b2'.repeat(32), other: 'c3'.repeat(32) };
    const createdAt = '2025-10-19T22:00:00.000Z';
    await files.insertMany(
      Object.values(hashes).map((sha256) => ({ sha256, bytes: 1234, mediaType: 'image/jpeg', createdAt })),
    );
    const upload = { draftId, personId: person.id, receivedAt: createdAt, width: 10, height: 10, thumbSha256: null };
    await uploads.insert({
      ...upload, id: kept, sha256: hashes.original, name: 'odo.jpg', copySha256: hashes.copy,
      takenLocal: '2025-10-19T15:50:00', takenOffset: null, copyRemoved: '["location"]',
    }); // prettier-ignore
    await uploads.insert({
      ...upload, id: removed, sha256: hashes.other, name: 'blurred.jpg', copySha256: null,
      takenLocal: null, takenOffset: null, copyRemoved: '[]',
    }); // prettier-ignore
    const fields = {
      [`photos/${kept}/role`]: 'odometer',
      [`photos/${kept}/caption`]: ' After the ride ',
      [`photos/${removed}/removed`]: 'yes',
    };
    await typeInto({ person, draft: draftId, fields });
    await sealWorksheet({ person, draftId });
    const [service] = (await readHistory(machine)).services;
    expect(service?.attachments).toEqual([
      {
        sha256: hashes.original,
        bytes: 1234,
        mediaType: 'image/jpeg',
        role: 'odometer',
        takenAt: { local: '2025-10-19T15:50:00' },
        receivedAt: createdAt,
        caption: 'After the ride',
        copy: { sha256: hashes.copy, bytes: 1234, mediaType: 'image/jpeg', removed: ['location'] },
      },
    ]);
    expect(service?.body.checks.find(({ key }) => key === 'odometer-photographed')).toMatchObject({ result: 'met' });
  });

  it('shows on the bench what it left open, and then what is due next', async () => {
    const { person, machine, begin } = await riderWithOil();
    const draftId = await begin();
    const before = await readBench({ person, machine });
    expect(before.worksheets).toMatchObject([{ id: draftId, states: ['Engine drained, not refilled: do not start.'] }]);
    expect((await readGarage({ person })).drafts).toMatchObject([{ id: draftId, kind: 'worksheet', subject: machine }]);
    await sealWorksheet({ person, draftId });
    const after = await readBench({ person, machine });
    expect(after.worksheets).toEqual([]);
    const lane = after.rules[0]?.lanes.find(({ item }) => item === 'engine-oil');
    // 10,238 mi and the preset's 5,000 mi: common practice, no source.
    expect(lane).toMatchObject({ done: [{ at: 10238, seq: 2 }], limit: 15238 });
    expect(after.waiting.filter(({ kind }) => kind === 'gap').map(({ title }) => title)).toContain(
      'Entry 2: No photo of the odometer',
    );
  });
});
