import { randomUUID } from 'node:crypto';
import { readdirSync } from 'node:fs';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import { sealData } from 'iron-session';
import sharp from 'sharp';
import { database, write } from '@/db/index';
import { draftChanges, drafts, files, uploads } from '@/db/models/drafts';
import { machines } from '@/db/models/machines';
import { invitations, packets } from '@/db/models/proof';
import { people, relations, type PersonRow } from '@/db/models/people';
import { closeDraft } from '@/db/queries/drafts';
import { findLogOf, lastCheckpoint } from '@/db/queries/logs';
import { foldChanges } from '@/lib/domain/field-changes';
import { hashPassword, isPassword, mostWaiting } from '@/lib/auth/password';
import { mostKept, readerCookieOptions } from '@/lib/auth/reader-cookie';
import { env } from '@/lib/env';
import { now } from '@/lib/ports/clock';
import { statesTooManyPixels } from '@/lib/ports/image';
import { answerInvitation } from '@/lib/services/answer-invitation';
import {
  appendDraftChanges,
  longestValue,
  mostCharactersOfADraft,
  toleratedLeadMilliseconds,
} from '@/lib/services/append-draft-changes';
import { appendEntry } from '@/lib/services/append-entry';
import { createMachine, mostMachines } from '@/lib/services/create-machine';
import { createShop } from '@/lib/services/create-shop';
import { inviteCountersigner } from '@/lib/services/invite-countersigner';
import { machineInput } from '@/lib/services/machine-input';
import { moveWorksheet } from '@/lib/services/move-worksheet';
import { mostBytesADay, mostUploadsOfADraft, receiveUpload } from '@/lib/services/receive-upload';
import { queuePacket, mostPacketsADay, mostPacketsWaiting, requestPacket } from '@/lib/services/request-packet';
import { mostCharactersOfAnEntry } from '@/lib/services/seal-next';
import { mostOpenDrafts, startDraft } from '@/lib/services/start-draft';
import { makePerson, useTestDatabase } from '../../setup/test-database';
import { draftWith, riderWithMachine } from './garage-story';

useTestDatabase();

const change = (field: string, value: string, deviceAt: string) => ({ id: randomUUID(), field, value, deviceAt });
const fromNow = (milliseconds: number) => new Date(now().getTime() + milliseconds).toISOString();

async function relate(person: PersonRow, subjectId: string): Promise<void> {
  const since = '2026-01-01T00:00:00.000Z';
  const relation = { id: randomUUID(), personId: person.id, subjectKind: 'machine', subjectId } as const;
  await relations.insert({ ...relation, relation: 'helper', since, until: null });
}

describe('a device whose clock runs ahead', () => {
  it('does not win over a change that somebody makes later, and is told the time it was given', async () => {
    const { person, shelf } = await riderWithMachine();
    const draftId = await draftWith({ person, kind: 'receipt', subject: shelf, fields: {} });
    const forged = change('total', '1.00', '9999-12-31T23:59:59.999Z');
    const answer = await appendDraftChanges({ person, draftId, input: { changes: [forged] } });
    expect(answer.accepted).toEqual([forged.id]);
    const [told] = answer.changes;
    expect(told).toMatchObject({ id: forged.id, value: '1.00' });
    const lead = Date.parse(told!.deviceAt) - Date.parse(answer.at);
    expect(lead).toBe(toleratedLeadMilliseconds + 1);

    // As a device stamps it three minutes later: nobody waits that long here.
    const honest = { ...change('total', '89.94', ''), deviceAt: fromNow(toleratedLeadMilliseconds + 60_000) };
    await draftChanges.insert({ ...honest, draftId, serverAt: now().toISOString(), personId: person.id });
    expect(foldChanges(await draftChanges.all({ draftId })).total).toBe('89.94');
  });

  it('keeps the order of its own changes', async () => {
    const { person, shelf } = await riderWithMachine();
    const draftId = await draftWith({ person, kind: 'receipt', subject: shelf, fields: {} });
    const at = (hours: number) => fromNow(hours * 3_600_000);
    const sent = [change('total', 'third', at(9)), change('total', 'first', at(0)), change('total', 'second', at(8))];
    await appendDraftChanges({ person, draftId, input: { changes: sent } });
    const kept = await draftChanges.all({ draftId }, { order: [['deviceAt', 'ASC']] });
    expect(kept.map(({ value }) => value)).toEqual(['first', 'second', 'third']);
  });

  it.each([
    ['just inside the tolerance is believed', toleratedLeadMilliseconds - 2000, true],
    ['well past it is not', toleratedLeadMilliseconds + 2000, false],
  ])('%s', async (_, lead, isBelieved) => {
    const { person, shelf } = await riderWithMachine();
    const draftId = await draftWith({ person, kind: 'receipt', subject: shelf, fields: {} });
    const sent = change('total', '1.00', fromNow(lead));
    await appendDraftChanges({ person, draftId, input: { changes: [sent] } });
    const kept = await draftChanges.find({ draftId, id: sent.id });
    expect(kept?.deviceAt === sent.deviceAt).toBe(isBelieved);
  });
});

describe('what one person may pile up', () => {
  it('is four million characters in a draft, earlier versions counted', async () => {
    const { person, shelf } = await riderWithMachine();
    const draftId = await draftWith({ person, kind: 'receipt', subject: shelf, fields: {} });
    const row = { draftId, deviceAt: fromNow(0), serverAt: fromNow(0), personId: person.id };
    const text = 'x'.repeat(longestValue);
    const many = Array.from({ length: mostCharactersOfADraft / longestValue - 1 }, () => ({
      ...row,
      id: randomUUID(),
      field: 'notes',
      value: text,
    }));
    await write((transaction) => draftChanges.insertMany(many, { transaction }));
    const send = (value: string) =>
      appendDraftChanges({
        person,
        draftId,
        input: { changes: [change('notes', value, fromNow(0))], since: fromNow(0) },
      });
    await expect(send(text)).resolves.toMatchObject({ refused: [] });
    await expect(send('x')).rejects.toMatchObject({ code: 'too-large' });
  });

  it('is a hundred open worksheets on a machine, and a discarded one makes room', async () => {
    const { person, machine } = await riderWithMachine();
    const begin = () => startDraft({ person, input: { id: randomUUID(), kind: 'worksheet', subject: machine } });
    for (let count = 0; count < mostOpenDrafts; count++) await begin();
    await expect(begin()).rejects.toMatchObject({ code: 'too-large' });
    const [one] = await drafts.all({ subjectId: machine });
    await write((transaction) => closeDraft(one!.id, { state: 'discarded' }, fromNow(0), transaction));
    await expect(begin()).resolves.toMatchObject({ isNew: true });
  });

  it('is a handful of packets waiting, and so many in a day', async () => {
    const { person, machine } = await riderWithMachine();
    const queue = () => queuePacket({ machineId: machine, by: person.id, purpose: '' });
    const ask = () => requestPacket({ person, machineId: machine, input: { purpose: '' } });
    for (let count = 0; count < mostPacketsWaiting; count++) await queue();
    await expect(ask()).rejects.toThrow(/^5 packets .* not built yet/);
    for (let count = mostPacketsWaiting; count < mostPacketsADay; count++) await queue();
    await packets.update({ createdBy: person.id }, { state: 'failed' });
    await expect(ask()).rejects.toThrow(/within a day/);
  });

  it('is a million characters in one entry', async () => {
    const { person, machine } = await riderWithMachine();
    const log = await findLogOf(machine);
    const seal = (length: number) =>
      appendEntry({
        log: log!.id,
        kind: 'reading',
        by: person.id,
        idempotencyKey: randomUUID(),
        parts: async () => ({ notes: { text: 'x'.repeat(length) } }),
      });
    // In base64url four characters stand for three.
    await expect(seal((mostCharactersOfAnEntry * 3) / 4)).rejects.toMatchObject({ code: 'too-large' });
    await expect(seal((mostCharactersOfAnEntry * 3) / 4 - 100)).resolves.toMatchObject({ isNew: true });
  });
});

describe('somebody who sets up a machine', () => {
  it('under the id of another’s machine or shelf is told that there is none, and nothing is sealed there', async () => {
    const theirs = await riderWithMachine();
    const stranger = await makePerson({ name: 'Teodora Lindqvist' });
    for (const id of [theirs.machine, theirs.shelf]) {
      const before = await sizeOf(id);
      await expect(setUp(stranger, id)).rejects.toMatchObject({ code: 'not-found' });
      expect(await sizeOf(id)).toBe(before);
    }
  });

  it('has room for a hundred', async () => {
    const { person, machine } = await riderWithMachine();
    const row = await machines.find({ id: machine });
    const since = row!.createdAt;
    for (let count = 1; count < mostMachines; count++) {
      const id = randomUUID();
      await machines.insert({ ...row!, id });
      const relation = { id: randomUUID(), personId: person.id, subjectKind: 'machine', subjectId: id } as const;
      await relations.insert({ ...relation, relation: 'owner', since, until: null });
    }
    await expect(setUp(person, randomUUID())).rejects.toMatchObject({ code: 'too-large' });
    await expect(setUp(person, machine)).resolves.toMatchObject({ machine });
  });

  const setUp = (person: PersonRow, machine: string) => {
    const words = { make: 'Corvane', model: 'Wren 300', kind: 'big V-twin tourer', why: 'new', timeZone: 'UTC' };
    return createMachine({
      person,
      input: machineInput.parse({
        ...words,
        machine,
        distanceUnit: 'km',
        frameNumber: 'WR300-0042',
        firstUseOn: '2022-06-14',
      }),
    });
  };
  const sizeOf = async (subject: string) => {
    const log = await findLogOf(subject);
    return (await lastCheckpoint(log!.id))?.size;
  };
});

it('keeps as many links and invitations in a reader’s cookie as a browser takes', async () => {
  const ids = () => Array.from({ length: mostKept }, () => randomUUID());
  const options = readerCookieOptions();
  const sealed = await sealData(
    { links: ids(), invitations: ids() },
    { password: options.password, ttl: options.ttl ?? 0 },
  );
  // RFC 6265 section 6.1: at least 4096 bytes with name and attributes, for which 300 are left here.
  expect(sealed.length).toBeLessThan(4096 - 300);
});

describe('an invitation to countersign', () => {
  it('is not answered by a technician who only knows its id', async () => {
    const { person, machine } = await riderWithMachine();
    const id = await invite(person, machine, 'workshop@halyard.example');
    const stranger = await makePerson({ name: 'Teodora Lindqvist' });
    const shop = await createShop({ person: stranger, input: { name: 'Not Asked', address: '1 Any Street', registration: '' } }); // prettier-ignore
    const answer = (cameByAddress: boolean) =>
      answerInvitation({
        person: stranger,
        invitationId: id,
        shopId: shop.id,
        cameByAddress,
        input: { answer: 'decline', reason: '' },
      });
    await expect(answer(false)).rejects.toMatchObject({ code: 'not-found' });
    expect((await invitations.find({ id }))?.answeredAt).toBeNull();
    await expect(answer(true)).resolves.toMatchObject({ outcome: 'declined' });
  });

  it('is answered without its address by whoever has confirmed the e-mail address it was sent to', async () => {
    const { person, machine } = await riderWithMachine();
    const asked = await makePerson({ name: 'Teodora Lindqvist' });
    const shop = await createShop({ person: asked, input: { name: 'Halyard Cycle Works', address: '2 Any Street', registration: '' } }); // prettier-ignore
    const id = await invite(person, machine, asked.email);
    const input = { answer: 'decline', reason: '' } as const;
    const options = { invitationId: id, shopId: shop.id, cameByAddress: false, input };
    await people.update({ id: asked.id }, { emailConfirmedAt: null });
    const unconfirmed = { ...asked, emailConfirmedAt: null };
    await expect(answerInvitation({ person: unconfirmed, ...options })).rejects.toMatchObject({ code: 'not-found' });
    await expect(answerInvitation({ person: asked, ...options })).resolves.toMatchObject({ outcome: 'declined' });
  });

  it('is one of twenty in a day, however many machines a person has', async () => {
    const one = await riderWithMachine();
    for (let count = 0; count < 20; count++) await invite(one.person, one.machine, `shop${count}@halyard.example`);
    const input = { email: 'another@halyard.example', message: '' };
    await expect(
      inviteCountersigner({ person: one.person, machineId: one.machine, seq: await serviceOf(one), input }),
    ).rejects.toMatchObject({ code: 'too-many-attempts' });
  });
});

/** A row as `inviteCountersigner` leaves it: what is asked here is who may answer. */
async function invite(owner: PersonRow, machineId: string, email: string): Promise<string> {
  const id = randomUUID();
  const log = await findLogOf(machineId);
  await invitations.insert({
    id,
    logId: log!.id,
    seq: 0,
    machineId,
    email,
    tokenHash: id,
    invitedBy: owner.id,
    message: '',
    createdAt: fromNow(0),
    expiresAt: fromNow(3_600_000),
    openedAt: null,
    remindedAt: null,
    withdrawnAt: null,
    answeredAt: null,
    answeredBy: null,
    shopId: null,
    outcome: null,
    declineReason: null,
    answerSeq: null,
  });
  return id;
}

async function serviceOf({ person, machine }: { person: PersonRow; machine: string }): Promise<number> {
  const log = await findLogOf(machine);
  const { seq } = await appendEntry({
    log: log!.id,
    kind: 'service',
    by: person.id,
    idempotencyKey: randomUUID(),
    parts: async () => ({ body: {} }),
  });
  return seq;
}

describe('a helper', () => {
  it('cannot take a worksheet of the owner to a machine of their own, and can move one they began', async () => {
    const owner = await riderWithMachine();
    const helper = await riderWithMachine();
    await relate(helper.person, owner.machine);
    const input = { subject: helper.machine };
    const theirs = await draftWith({ person: owner.person, kind: 'worksheet', subject: owner.machine, fields: {} });
    const move = (person: PersonRow, draftId: string, subject = input.subject) =>
      moveWorksheet({ person, draftId, input: { subject } });
    await expect(move(helper.person, theirs)).rejects.toMatchObject({ code: 'forbidden' });
    expect((await drafts.find({ id: theirs }))?.subjectId).toBe(owner.machine);
    const own = await draftWith({ person: helper.person, kind: 'worksheet', subject: owner.machine, fields: {} });
    await expect(move(helper.person, own)).resolves.toMatchObject({ subject: helper.machine });
  });
});

describe('an upload', () => {
  const picture = () =>
    sharp({ create: { width: 8, height: 8, channels: 3, background: '#888' } })
      .jpeg()
      .toBuffer();
  const send = async (person: PersonRow, query: { id: string; draft: string; name: string }, bytes?: Buffer) =>
    receiveUpload({ person, query, body: once(bytes ?? (await picture())) });

  it('under the id of somebody else’s tells nothing of theirs', async () => {
    const [mine, theirs] = [await riderWithMachine(), await riderWithMachine()];
    const [draft, other] = await Promise.all(
      [mine, theirs].map(({ person, shelf }) => draftWith({ person, kind: 'receipt', subject: shelf, fields: {} })),
    );
    const id = randomUUID();
    await send(theirs.person, { id, draft: other!, name: 'a private name.jpg' });
    const refusal = send(mine.person, { id, draft: draft!, name: 'front.jpg' });
    await expect(refusal).rejects.toThrow(/^front\.jpg cannot be kept/);
    await expect(refusal).rejects.not.toThrow(/private/);
  });

  it('is one of a hundred', async () => {
    const { person, shelf } = await riderWithMachine();
    const draft = await draftWith({ person, kind: 'receipt', subject: shelf, fields: {} });
    await send(person, { id: randomUUID(), draft, name: 'front.jpg' });
    const [row] = await uploads.all({ draftId: draft });
    for (let count = 1; count < mostUploadsOfADraft; count++) await uploads.insert({ ...row!, id: randomUUID() });
    const late = send(person, { id: randomUUID(), draft, name: 'back.jpg' });
    await expect(late).rejects.toMatchObject({ code: 'too-large' });
    expect(readdirSync(path.join(env.dataFolder, 'blobs', 'incoming'))).toEqual([]);
  });

  it('is refused once a person has sent four gigabytes within a day', async () => {
    const { person, shelf } = await riderWithMachine();
    const draft = await draftWith({ person, kind: 'receipt', subject: shelf, fields: {} });
    const bytes = await picture();
    const { sha256 } = await send(person, { id: randomUUID(), draft, name: 'front.jpg' }, bytes);
    // The file on record is called so large that this one fills the allowance exactly, then with one byte too many.
    const refuses = async (recorded: number) => {
      await files.update({ sha256 }, { bytes: recorded });
      const id = randomUUID();
      const answer = await send(person, { id, draft, name: 'back.jpg' }, bytes).catch((error: unknown) => error);
      await uploads.remove({ id });
      return answer;
    };
    expect(await refuses(mostBytesADay - bytes.length)).toMatchObject({ isNew: true });
    expect(await refuses(mostBytesADay - bytes.length + 1)).toMatchObject({ code: 'too-large' });
  });

  it('that was decoded while the worksheet was sealed is refused, not left out without a word', async () => {
    const { person, shelf } = await riderWithMachine();
    const draft = await draftWith({ person, kind: 'receipt', subject: shelf, fields: {} });
    const bytes = await picture();
    async function* slowly() {
      yield bytes;
      await write((transaction) => closeDraft(draft, { state: 'discarded' }, fromNow(0), transaction));
    }
    const refusal = receiveUpload({ person, query: { id: randomUUID(), draft, name: 'front.jpg' }, body: slowly() });
    await expect(refusal).rejects.toThrow('front.jpg came too late: this is discarded.');
    expect(await uploads.count({ draftId: draft })).toBe(0);
  });
});

describe('a HEIC', () => {
  const stating = (width: number, height: number) => {
    const box = Buffer.alloc(20);
    box.writeUInt32BE(20, 0);
    box.write('ispe', 4, 'latin1');
    box.writeUInt32BE(width, 12);
    box.writeUInt32BE(height, 16);
    return Buffer.concat([Buffer.from('....ftypheic'), box, Buffer.from('after')]);
  };

  it.each([
    [10_000, 5_000, false],
    [10_000, 5_001, true],
    [65_535, 65_535, true],
  ])('of %i by %i pixels is refused before it is decoded: %s', (width, height, isRefused) => {
    expect(statesTooManyPixels(stating(width, height))).toBe(isRefused);
  });
});

async function* once(bytes: Buffer): AsyncGenerator<Uint8Array> {
  yield bytes;
}

it('turns a flood of passwords away instead of keeping it waiting', async () => {
  const flood = Array.from({ length: mostWaiting + 5 }, () => isPassword('$argon2id$damaged', 'x'));
  const outcomes = await Promise.allSettled(flood);
  const busy = outcomes.filter(
    ({ status, ...rest }) => status === 'rejected' && 'reason' in rest && String(rest.reason).includes('Very many'),
  );
  // One is being checked and a hundred wait.
  expect(busy).toHaveLength(4);
  await expect(isPassword(await hashPassword('a good long one'), 'a good long one')).resolves.toBe(true);
});

it('gives a statement’s values to nobody’s log', async () => {
  const { asRefusal } = await import('@/lib/auth/refusal');
  const said: unknown[] = [];
  const { error: original } = console;
  console.error = (...words: unknown[]) => void said.push(...words);
  try {
    const failed = database().query("INSERT INTO people (id, password_hash) VALUES ('x', 'secret of the rider')");
    await failed.catch(asRefusal);
  } finally {
    console.error = original;
  }
  expect(said.join('\n')).toMatch(/\[internal [0-9a-f]{8}\]/);
  expect(said.every((word) => typeof word === 'string')).toBe(true);
  expect(said.join('\n')).not.toContain('secret of the rider');
});
