import { randomUUID } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { findLogOf } from '@/db/queries/logs';
import { relations } from '@/db/models/people';
import { verifyBundle } from '@/lib/evidence/verify';
import { bundleText } from '@/lib/evidence/bundle';
import { answerInvitation } from '@/lib/services/answer-invitation';
import { appendEntry } from '@/lib/services/append-entry';
import { bundleRecord } from '@/lib/services/bundle-record';
import { confirmReceipt } from '@/lib/services/confirm-receipt';
import { publishedKeys } from '@/lib/services/log-keys';
import { previewStrike } from '@/lib/services/preview-strike';
import { readHistory } from '@/lib/services/read-history';
import { readRecord, readShelf } from '@/lib/services/read-record';
import { readShelfLots } from '@/lib/services/read-shelf-lots';
import { sealWorksheet } from '@/lib/services/seal-worksheet';
import { strikeEntry, strikeInput } from '@/lib/services/strike-entry';
import { createShop } from '@/lib/services/create-shop';
import { inviteCountersigner } from '@/lib/services/invite-countersigner';
import { countersignatureBody } from '../../setup/sealed-record';
import { makePerson, useTestDatabase } from '../../setup/test-database';
import { draftWith, lendAHand, oilChange, receiptFields, riderWithMachine } from './garage-story';

useTestDatabase();

const input = (reason = 'Logged on the wrong machine.') => strikeInput.parse({ reason, key: randomUUID() });

/** A rider with a receipt on the shelf and an oil change that drew from it, entry 2. */
async function riderWithService() {
  const rider = await riderWithMachine();
  const { person, machine, shelf } = rider;
  const receipt = await draftWith({ person, kind: 'receipt', subject: shelf, fields: receiptFields });
  const purchase = await confirmReceipt({ person, draftId: receipt });
  const serve = async (fields: Record<string, string> = {}) => {
    const draftId = await draftWith({ person, kind: 'worksheet', subject: machine, fields: { ...oilChange(purchase), ...fields } }); // prettier-ignore
    return (await sealWorksheet({ person, draftId })).seq;
  };
  const seq = await serve();
  const strike = (of: number, given = input()) => strikeEntry({ person, subject: { machine }, seq: of, input: given });
  const strikeOnShelf = (of: number) => strikeEntry({ person, subject: { shelf }, seq: of, input: input('Returned.') });
  const left = async () => (await readShelfLots({ person, shelf })).lots.map(({ balance }) => balance.amount);
  return { ...rider, purchase, seq, serve, strike, strikeOnShelf, left };
}

describe('a shop and a struck entry', () => {
  it('is not asked about one', async () => {
    const { person, machine, seq, strike } = await riderWithService();
    await strike(seq);
    const asked = inviteCountersigner({ person, machineId: machine, seq, input: { email: 'desk@halyard.example', message: '' } }); // prettier-ignore
    await expect(asked).rejects.toThrow(`Entry ${seq} was struck, so there is nothing left to vouch for.`);
  });

  it('cannot countersign one that was struck after the shop was asked', async () => {
    const { person, machine, seq, strike } = await riderWithService();
    const { id } = await inviteCountersigner({ person, machineId: machine, seq, input: { email: 'desk@halyard.example', message: '' } }); // prettier-ignore
    await strike(seq);
    const technician = await makePerson({ name: 'Teodora Lindqvist', email: 'desk@halyard.example' });
    const { id: shopId } = await createShop({
      person: technician,
      input: { name: 'Halyard Cycle Works', address: '1 Quay Street, Halyard', registration: '' },
    });
    const input = { answer: 'countersign', capacity: 'inspected', statement: 'We looked at it.' } as const;
    const answered = answerInvitation({ person: technician, invitationId: id, shopId, cameByAddress: true, input });
    await expect(answered).rejects.toThrow(`Entry ${seq} was struck`);
  });
});

describe('striking a service', () => {
  it('counts it as not done, takes its reading out and gives back what it drew', async () => {
    const { machine, seq, strike, left } = await riderWithService();
    expect(await left()).toEqual(['1.5', '0']);
    const before = await readHistory(machine);
    expect(before.services.map((one) => one.seq)).toEqual([seq]);
    expect(before.readings.map(({ value }) => value)).toEqual(['4', '10238']);
    await strike(seq);
    const after = await readHistory(machine);
    expect(after.services).toEqual([]);
    expect(after.readings.map(({ value }) => value)).toEqual(['4']);
    expect(await left()).toEqual(['6', '1']);
  });

  it('lets it stand again when the strike is struck: done, read and drawn as before', async () => {
    const { machine, seq, strike, left } = await riderWithService();
    const first = await strike(seq);
    await strike(first.seq, input('It was the right machine.'));
    const history = await readHistory(machine);
    expect(history.services.map((one) => one.seq)).toEqual([seq]);
    expect(history.readings.map(({ value }) => value)).toEqual(['4', '10238']);
    expect(await left()).toEqual(['1.5', '0']);
    const record = await readRecord({ machineId: machine });
    expect(record.entries.map(({ struckBy }) => struckBy?.seq ?? null)).toEqual([
      null,
      null,
      null,
      first.seq + 1,
      null,
    ]);
  });

  it('says beforehand what becomes due and what comes back', async () => {
    const { person, machine, seq } = await riderWithService();
    const preview = await previewStrike({ person, subject: { machine }, seq });
    expect(preview.refusal).toBeNull();
    expect(preview.returned).toEqual([
      '4.5 US qt of Fernhill V-twin 20W-50, lot 1',
      '1 piece of Tarn oil filter, lot 1',
    ]);
    expect(preview.due.map(({ title }) => title)).toContain('Engine oil and filter');
    for (const { before, after } of preview.due) expect(before).not.toBe(after);
    expect(preview).toMatchObject({ countersigned: false, standingAgain: [], takenAgain: [], uses: [] });
  });

  it('is sealed once however often the form is sent, and refused to a second form', async () => {
    const { seq, strike } = await riderWithService();
    const given = input();
    const answers = await Promise.all([1, 2, 3].map(() => strike(seq, given)));
    expect(new Set(answers.map((one) => one.seq)).size).toBe(1);
    expect(answers.filter(({ isNew }) => isNew)).toHaveLength(1);
    await expect(strike(seq)).rejects.toMatchObject({ code: 'conflict', message: /struck already, by entry 3/ });
  });

  it('lets one of two strikes in a race through', async () => {
    const { machine, seq, strike } = await riderWithService();
    const answers = await Promise.allSettled([strike(seq), strike(seq)]);
    expect(answers.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
    expect((await readRecord({ machineId: machine })).entries).toHaveLength(4);
  });

  it('is refused to a helper, who learns nothing more, and to strangers', async () => {
    const { machine, shelf, seq } = await riderWithService();
    const helper = await lendAHand(machine);
    const asHelper = { person: helper, seq, input: input() };
    await expect(strikeEntry({ ...asHelper, subject: { machine } })).rejects.toMatchObject({ code: 'not-found' });
    await expect(strikeEntry({ ...asHelper, subject: { shelf } })).rejects.toMatchObject({ code: 'not-found' });
    await expect(previewStrike({ person: helper, subject: { machine }, seq })).rejects.toMatchObject({
      code: 'not-found',
    });
  });

  it('needs a reason that can be sealed', () => {
    for (const reason of ['', '   ', 'safe\u202Egnp', 'x'.repeat(2001)]) {
      expect(strikeInput.safeParse({ reason, key: randomUUID() }).success).toBe(false);
    }
    expect(strikeInput.parse({ reason: ' Cafe\u0301 ', key: randomUUID() }).reason).toBe('Café');
  });

  it('is refused where what it drew has been used meanwhile, until that is struck', async () => {
    const { seq, serve, strike } = await riderWithService();
    const first = await strike(seq);
    const other = await serve();
    await expect(strike(first.seq)).rejects.toMatchObject({ code: 'conflict', message: /only 1.5 US qt is left/ });
    await strike(other);
    await expect(strike(first.seq)).resolves.toMatchObject({ isNew: true });
  });
});

describe('what cannot be struck', () => {
  it('is the opening, and the only terms', async () => {
    const { strike } = await riderWithService();
    await expect(strike(0)).rejects.toMatchObject({ code: 'conflict', message: /opening/ });
    await expect(strike(1)).rejects.toMatchObject({ code: 'conflict', message: /No terms would be left/ });
  });

  it('is a shop’s countersignature', async () => {
    const { person, machine, seq, strike } = await riderWithService();
    const { entries, log } = await readRecord({ machineId: machine });
    const signed = await appendEntry({
      log: log.id,
      kind: 'countersignature',
      by: person.id,
      idempotencyKey: randomUUID(),
      refersTo: { seq, leafHash: entries[seq]!.leafHash },
      parts: async () => ({ body: countersignatureBody }),
    });
    await expect(strike(signed.seq)).rejects.toMatchObject({ code: 'conflict', message: /shop’s word/ });
    expect((await previewStrike({ person, subject: { machine }, seq })).countersigned).toBe(true);
  });
});

describe('striking terms', () => {
  it('lets the earlier terms stand again', async () => {
    const { person, machine, strike } = await riderWithService();
    const log = (await findLogOf(machine))!.id;
    const newer = await appendEntry({
      log,
      kind: 'terms',
      by: person.id,
      idempotencyKey: randomUUID(),
      parts: async () => ({ body: { schedule: [], fluidPoints: [], fasteners: [], parts: [], warranty: [] } }),
    });
    expect((await readHistory(machine)).termsSeq).toBe(newer.seq);
    expect((await previewStrike({ person, subject: { machine }, seq: newer.seq })).termsAfter).toBe(1);
    await strike(newer.seq);
    const history = await readHistory(machine);
    expect(history.termsSeq).toBe(1);
    expect(history.terms?.schedule.length).toBeGreaterThan(0);
  });
});

describe('striking a purchase', () => {
  it('is refused while an entry that stands draws from it, then takes its lots off the shelf', async () => {
    const { person, machine, shelf, purchase, seq, strike, strikeOnShelf, left } = await riderWithService();
    await expect(strikeOnShelf(purchase.seq)).rejects.toMatchObject({
      code: 'conflict',
      message: /entries that stand/,
    });
    const preview = await previewStrike({ person, subject: { shelf }, seq: purchase.seq });
    expect(preview.uses.map(({ machine: of, seq: use }) => [of?.id, use])).toEqual([[machine, seq], [machine, seq]]); // prettier-ignore
    await strike(seq);
    await strikeOnShelf(purchase.seq);
    expect(await left()).toEqual([]);
    const entry = (await readShelf({ shelfId: shelf })).entries[purchase.seq];
    expect(entry).toMatchObject({
      struckBy: { reason: 'Returned.' },
      purchase: { supplier: { name: 'Brandywell Powersports' } },
    });
  });

  it('names no machine of other people', async () => {
    const { shelf, purchase } = await riderWithService();
    const other = await riderWithMachine();
    await relations.insert({
      id: randomUUID(), personId: other.person.id, subjectKind: 'shelf', subjectId: shelf, relation: 'owner',
      since: '2025-01-01T00:00:00.000Z', until: null,
    }); // prettier-ignore
    const preview = await previewStrike({ person: other.person, subject: { shelf }, seq: purchase.seq });
    expect(preview.uses.map(({ machine }) => machine)).toEqual([null, null]);
    expect(preview.refusal).toMatch(/entries that stand/);
  });

  it('keeps a struck service from standing again while the purchase it drew from is struck', async () => {
    const { purchase, seq, strike, strikeOnShelf, left } = await riderWithService();
    const first = await strike(seq);
    const returned = await strikeOnShelf(purchase.seq);
    await expect(strike(first.seq)).rejects.toMatchObject({ code: 'conflict', message: /receipt 1, which is struck/ });
    await strikeOnShelf(returned.seq);
    expect(await left()).toEqual(['6', '1']);
    await strike(first.seq);
    expect(await left()).toEqual(['1.5', '0']);
  });
});

describe('a record with a strike', () => {
  it('is unchanged to a reader, and altered when the strike is left out', async () => {
    const { machine, seq, strike } = await riderWithService();
    await strike(seq);
    const { text, bundle } = await bundleRecord({ machineId: machine, purpose: 'Warranty claim', number: 'W-0001' });
    const key = publishedKeys()[0]?.verifierKey;
    const whole = verifyBundle({ bundleText: text, key });
    expect([whole.outcome, whole.alterations]).toEqual(['unchanged', []]);
    const [log, ...shelves] = bundle.logs;
    const cut = { ...bundle, logs: [{ ...log!, entries: log!.entries.slice(0, -1) }, ...shelves] };
    const finding = verifyBundle({ bundleText: bundleText(cut), key });
    expect(finding.outcome).toBe('altered');
    expect(finding.alterations.map(({ code }) => code)).toContain('entries-missing');
  });
});
