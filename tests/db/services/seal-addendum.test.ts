import { randomUUID } from 'node:crypto';
import { Readable } from 'node:stream';
import sharp from 'sharp';
import { describe, expect, it } from 'vitest';
import type { PersonRow } from '@/db/models/people';
import { addendumFrom, addendumShown } from '@/lib/domain/addendum';
import { foldChanges } from '@/lib/domain/field-changes';
import { appendDraftChanges } from '@/lib/services/append-draft-changes';
import { discardDraft } from '@/lib/services/discard-draft';
import { findOpenAddendum } from '@/lib/services/find-open-addendum';
import { readBench } from '@/lib/services/read-bench';
import { readDraft } from '@/lib/services/read-draft';
import { readFileOf } from '@/lib/services/read-file';
import { readGarage } from '@/lib/services/read-garage';
import { readRecord } from '@/lib/services/read-record';
import { receiveUpload } from '@/lib/services/receive-upload';
import { sealAddendum } from '@/lib/services/seal-addendum';
import { startDraft } from '@/lib/services/start-draft';
import { useTestDatabase } from '../../setup/test-database';
import { draftWith, lendAHand, riderWithMachine, typeInto } from './garage-story';

useTestDatabase();

/** A rider with an addendum to the opening begun. */
async function riderWriting(
  fields: Record<string, string> = { text: 'The first owner was the dealer, for six weeks.' },
) {
  const rider = await riderWithMachine();
  const { person, machine } = rider;
  const draft = await draftWith({ person, kind: 'addendum', subject: machine, refersToSeq: 0, fields });
  const shown = async () =>
    addendumShown(addendumFrom(foldChanges((await readDraft({ person, draftId: draft })).changes)));
  const seal = async (by: PersonRow = person, given?: string) =>
    sealAddendum({ person: by, input: { draft, shown: given ?? (await shown()) } });
  return { ...rider, draft, shown, seal };
}

async function photograph(person: PersonRow, draft: string) {
  const picture = await sharp({ create: { width: 200, height: 150, channels: 3, background: '#778899' } }).jpeg().toBuffer(); // prettier-ignore
  const id = randomUUID();
  const answer = await receiveUpload({
    person,
    query: { id, draft, name: 'plug.jpg' },
    body: Readable.from([picture]),
  });
  await typeInto({ person, draft, fields: { [`photos/${id}/role`]: 'as-left', [`photos/${id}/caption`]: 'Dry' } });
  return answer;
}

describe('an addendum', () => {
  it('is an entry of its own, with its words and pictures, and is named at the one it adds to', async () => {
    const { person, machine, draft, seal } = await riderWriting();
    const picture = await photograph(person, draft);
    expect(await seal()).toEqual({ machine, refersToSeq: 0, seq: 2, isNew: true });
    const { entries } = await readRecord({ machineId: machine });
    expect(entries[0]?.addenda).toEqual([2]);
    expect(entries[2]).toMatchObject({
      kind: 'addendum',
      title: 'Addendum to entry 0',
      refersTo: { seq: 0 },
      body: { text: 'The first owner was the dealer, for six weeks.' },
      author: { person: person.id, name: person.name, role: 'owner' },
      attachments: [{ sha256: picture.sha256, role: 'as-left', caption: 'Dry', copy: { sha256: picture.copySha256 } }],
    });
    await expect(readFileOf({ subject: machine, sha256: picture.sha256, kind: 'thumb' })).resolves.toBeDefined();
  });

  it('is sealed once however often it is asked for', async () => {
    const { machine, seal, shown } = await riderWriting();
    const given = await shown();
    const answers = await Promise.all([1, 2, 3].map(() => seal(undefined, given)));
    expect(new Set(answers.map(({ seq }) => seq))).toEqual(new Set([2]));
    expect(answers.filter(({ isNew }) => isNew)).toHaveLength(1);
    expect((await readRecord({ machineId: machine })).entries).toHaveLength(3);
  });

  it('is not sealed in another form than the one that was shown', async () => {
    const { person, machine, draft, seal, shown } = await riderWriting();
    const earlier = await shown();
    await typeInto({ person, draft, fields: { text: 'Something else.' } });
    await expect(seal(undefined, earlier)).rejects.toMatchObject({ code: 'conflict' });
    const beforePhoto = await shown();
    await photograph(person, draft);
    await expect(seal(undefined, beforePhoto)).rejects.toMatchObject({ code: 'conflict' });
    expect((await readRecord({ machineId: machine })).entries).toHaveLength(2);
    await expect(seal()).resolves.toMatchObject({ isNew: true });
  });

  it('needs words, and every picture it names', async () => {
    const empty = await riderWriting({ text: '  ' });
    await expect(empty.seal()).rejects.toMatchObject({ code: 'invalid-input', fields: { text: /in your own words/ } });
    const missing = await riderWriting({ text: 'Checked hot.', 'photos/p1/role': 'part' });
    await expect(missing.seal()).rejects.toMatchObject({ fields: { 'photos/p1': /still on the phone/ } });
  });

  it('may be written by a helper, is sealed by an owner, and names both', async () => {
    const { person, machine, draft, seal } = await riderWriting({});
    const helper = await lendAHand(machine);
    await typeInto({ person: helper, draft, fields: { text: 'Retorqued after 100 mi; nothing moved.' } });
    await expect(seal(helper)).rejects.toMatchObject({ code: 'forbidden' });
    const { seq } = await seal(person);
    expect((await readRecord({ machineId: machine })).entries[seq]?.author).toEqual({
      person: helper.id,
      name: 'Joost Vandersloot',
      role: 'helper',
      sealedBy: person.name,
    });
  });

  it('adds to an entry there is, of a machine one works on', async () => {
    const { person, machine } = await riderWithMachine();
    const other = await riderWithMachine();
    const begin = (by: PersonRow, refersToSeq?: number) =>
      startDraft({ person: by, input: { id: randomUUID(), kind: 'addendum', subject: machine, refersToSeq } });
    await expect(begin(person, 99)).rejects.toMatchObject({ code: 'not-found' });
    await expect(begin(person)).rejects.toMatchObject({ code: 'not-found' });
    await expect(begin(other.person, 0)).rejects.toMatchObject({ code: 'not-found' });
    await expect(begin(person, 1)).resolves.toMatchObject({ isNew: true, draft: { refersToSeq: 1 } });
  });
});

describe('an addendum that is not sealed yet', () => {
  it('is found again at its entry, on the bench and in the garage, by name', async () => {
    const { person, machine, draft } = await riderWriting();
    expect(await findOpenAddendum({ person, machine, seq: 0 })).toEqual({ id: draft });
    expect(await findOpenAddendum({ person, machine, seq: 1 })).toBeNull();
    const [line] = (await readBench({ person, machine })).worksheets;
    expect(line).toMatchObject({
      title: 'Addendum to entry 0, not sealed',
      href: `/machines/${machine}/record/0/addendum`,
      isAddendum: true,
      states: [],
    });
    expect((await readGarage({ person })).drafts).toMatchObject([{ id: draft, kind: 'addendum', refersToSeq: 0 }]);
  });

  it('takes no more changes and no pictures once it is sealed or discarded', async () => {
    const { person, draft, seal } = await riderWriting();
    await seal();
    const late = { id: randomUUID(), field: 'text', value: 'More.', deviceAt: new Date().toISOString() };
    const append = appendDraftChanges({ person, draftId: draft, input: { changes: [late] } });
    await expect(append).rejects.toMatchObject({
      code: 'already-sealed',
      message: /addendum is already sealed as entry 2/,
    });
    await expect(photograph(person, draft)).rejects.toMatchObject({ code: 'already-sealed' });
    const other = await riderWriting();
    await discardDraft({ person: other.person, draftId: other.draft });
    await expect(other.seal()).rejects.toMatchObject({ code: 'conflict', message: /addendum was discarded/ });
  });
});
