import { randomUUID } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { write } from '@/db/index';
import { closeDraft } from '@/db/queries/drafts';
import { relations } from '@/db/models/people';
import { foldChanges } from '@/lib/domain/field-changes';
import {
  appendDraftChanges,
  longestValue,
  mostChangesAtOnce,
  appendChangesInput,
} from '@/lib/services/append-draft-changes';
import { createShelf } from '@/lib/services/create-shelf';
import { discardDraft } from '@/lib/services/discard-draft';
import { readDraft } from '@/lib/services/read-draft';
import { startDraft } from '@/lib/services/start-draft';
import { makePerson, useTestDatabase } from '../../setup/test-database';

useTestDatabase();

const deviceAt = '2026-04-18T10:00:00.000Z';
const change = (field: string, value: string | null, at = deviceAt) => ({
  id: randomUUID(),
  field,
  value,
  deviceAt: at,
});

async function openReceipt() {
  const person = await makePerson();
  const { shelf } = await createShelf({ person });
  const id = randomUUID();
  const input = { id, kind: 'receipt', subject: shelf } as const;
  await startDraft({ person, input });
  return { person, shelf, id, input };
}

describe('a draft', () => {
  it('is opened once however often its device asks', async () => {
    const { person, input } = await openReceipt();
    const again = await startDraft({ person, input });
    expect(again.isNew).toBe(false);
    expect(again.draft.id).toBe(input.id);
  });

  it('is opened once when two requests arrive together', async () => {
    const person = await makePerson();
    const { shelf } = await createShelf({ person });
    const input = { id: randomUUID(), kind: 'receipt', subject: shelf } as const;
    const answers = await Promise.all([1, 2, 3, 4].map(() => startDraft({ person, input })));
    expect(answers.filter(({ isNew }) => isNew)).toHaveLength(1);
  });

  it('does not exist for somebody else', async () => {
    const { id, input } = await openReceipt();
    const stranger = await makePerson({ name: 'Joost Vandersloot' });
    const refused = { code: 'not-found' };
    await expect(readDraft({ person: stranger, draftId: id })).rejects.toMatchObject(refused);
    await expect(startDraft({ person: stranger, input })).rejects.toMatchObject(refused);
    await expect(
      appendDraftChanges({ person: stranger, draftId: id, input: { changes: [change('supplier', 'x')] } }),
    ).rejects.toMatchObject(refused);
    await expect(discardDraft({ person: stranger, draftId: id })).rejects.toMatchObject(refused);
  });

  it('keeps each change once, and folds to the last by device time whatever the order of arrival', async () => {
    const { person, id } = await openReceipt();
    const late = change('supplier', 'Brandywell Powersports', '2026-04-18T10:05:00.000Z');
    const early = change('supplier', 'Brandywel');
    const first = await appendDraftChanges({ person, draftId: id, input: { changes: [late] } });
    const second = await appendDraftChanges({ person, draftId: id, input: { changes: [early, late] } });
    expect(first.accepted).toEqual([late.id]);
    expect(new Set(second.accepted)).toEqual(new Set([early.id, late.id]));
    const { changes } = await readDraft({ person, draftId: id });
    expect(changes).toHaveLength(2);
    expect(foldChanges(changes)).toEqual({ supplier: 'Brandywell Powersports' });
  });

  it('takes texts of every script as they are, in normalisation form C', async () => {
    const { person, id } = await openReceipt();
    const texts = ['Λάδι κινητήρα', 'Масло двигателя', '机油与滤清器', 'زيت المحرك', '🏍️ first oil', 'Cafe\u0301'];
    const changes = texts.map((text, i) => change(`notes-${i}`, text));
    await appendDraftChanges({ person, draftId: id, input: { changes } });
    const kept = foldChanges((await readDraft({ person, draftId: id })).changes);
    expect(Object.values(kept)).toEqual([...texts.slice(0, 5), 'Caf\u00e9']);
  });

  it('sets refused changes apart with a sentence and keeps the others', async () => {
    const { person, id } = await openReceipt();
    const good = change('supplier', 'Brandywell Powersports');
    const bad = [
      change('../supplier', 'x'),
      change('__proto__', 'x'),
      change('supplier/', 'x'),
      change('notes', 'a\u202eb'),
      change('notes', 'x'.repeat(longestValue + 1)),
    ];
    const answer = await appendDraftChanges({ person, draftId: id, input: { changes: [...bad, good] } });
    expect(answer.accepted).toEqual([good.id]);
    expect(answer.refused.map((one) => one.id)).toEqual(bad.map((one) => one.id));
    expect(answer.refused.at(-1)?.sentence).toBe('This text has 8001 characters; at most 8000 can be kept.');
  });

  it.each([longestValue - 1, longestValue])('keeps a text of %i characters', async (length) => {
    const { person, id } = await openReceipt();
    const long = change('notes', 'x'.repeat(length));
    const answer = await appendDraftChanges({ person, draftId: id, input: { changes: [long] } });
    expect(answer.accepted).toEqual([long.id]);
  });

  it('takes as many changes at once as it says, and no more', () => {
    const many = Array.from({ length: mostChangesAtOnce + 1 }, () => change('notes', 'x'));
    expect(appendChangesInput.safeParse({ changes: many.slice(1) }).success).toBe(true);
    expect(appendChangesInput.safeParse({ changes: many }).success).toBe(false);
  });

  it('gives a device what arrived since it last asked', async () => {
    const { person, id } = await openReceipt();
    const [one, two] = [change('supplier', 'a'), change('currency', 'USD')];
    const first = await appendDraftChanges({ person, draftId: id, input: { changes: [one] } });
    await new Promise((resolve) => setTimeout(resolve, 3));
    await appendDraftChanges({ person, draftId: id, input: { changes: [two] } });
    const later = new Date(Date.parse(first.at) + 1).toISOString();
    const answer = await appendDraftChanges({ person, draftId: id, input: { changes: [], since: later } });
    expect(answer.changes.map((row) => row.id)).toEqual([two.id]);
  });

  it('takes no change once it is sealed, but confirms what it has', async () => {
    const { person, id } = await openReceipt();
    const kept = change('supplier', 'Brandywell Powersports');
    await appendDraftChanges({ person, draftId: id, input: { changes: [kept] } });
    await write((t) => closeDraft(id, { state: 'sealed', sealedLog: 'log', sealedSeq: 3 }, deviceAt, t));
    const answer = await appendDraftChanges({ person, draftId: id, input: { changes: [kept] } });
    expect(answer.accepted).toEqual([kept.id]);
    await expect(
      appendDraftChanges({ person, draftId: id, input: { changes: [change('supplier', 'x')] } }),
    ).rejects.toMatchObject({
      code: 'already-sealed',
      status: 409,
      message: 'This receipt is already sealed as entry 3 of the shelf.',
    });
    await expect(discardDraft({ person, draftId: id })).rejects.toMatchObject({ code: 'already-sealed' });
  });

  it('is still open to a helper of the shelf, until the help ends', async () => {
    const { shelf, id } = await openReceipt();
    const helper = await makePerson({ name: 'Joost Vandersloot' });
    const since = '2026-01-01T00:00:00.000Z';
    const relation = { id: randomUUID(), personId: helper.id, subjectKind: 'shelf', subjectId: shelf } as const;
    await relations.insert({ ...relation, relation: 'helper', since, until: null });
    const answer = await appendDraftChanges({ person: helper, draftId: id, input: { changes: [change('a', 'b')] } });
    expect(answer.accepted).toHaveLength(1);
    await relations.update({ id: relation.id }, { until: since });
    await expect(readDraft({ person: helper, draftId: id })).rejects.toMatchObject({ code: 'not-found' });
  });

  it('is discarded once and for all, and says so to a late device', async () => {
    const { person, id } = await openReceipt();
    await discardDraft({ person, draftId: id });
    await discardDraft({ person, draftId: id });
    const late = appendDraftChanges({ person, draftId: id, input: { changes: [change('a', 'b')] } });
    await expect(late).rejects.toMatchObject({
      code: 'conflict',
      message: 'This receipt was discarded. Start a new one.',
    });
  });
});
