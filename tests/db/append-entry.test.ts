import { randomUUID } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { checkpoints, entries, entryParts, stampJobs, tokens } from '@/db/models/logs';
import { shelves } from '@/db/models/machines';
import { readStoredLogs } from '@/db/queries/entries';
import { findLog } from '@/db/queries/logs';
import { fromHex, toBase64 } from '@/lib/evidence/bytes';
import { parseCheckpoint, parseNote, verifyNote } from '@/lib/evidence/checkpoint';
import { openDisclosure } from '@/lib/evidence/disclosure';
import { leafHash, parseLeaf } from '@/lib/evidence/leaf';
import { rootOf } from '@/lib/evidence/merkle';
import { atTime } from '@/lib/ports/clock';
import { issuedCheckpoint } from '@/lib/ports/issued-checkpoints';
import { appendEntry } from '@/lib/services/append-entry';
import { keyOfNote } from '@/lib/services/log-keys';
import { openLog } from '@/lib/services/open-log';
import { stampingSettled } from '@/lib/services/stamp-checkpoints';
import { makePerson, useTestDatabase } from '../setup/test-database';

useTestDatabase();

async function openShelf() {
  const person = await makePerson();
  const opening = await openLog({
    subject: 'shelf',
    subjectId: randomUUID(),
    by: person.id,
    parts: async () => ({ body: { name: 'Imke’s shelf' } }),
  });
  return { person, opening };
}

const disposal = (log: string, by: string, why = 'spilt') => ({
  log,
  by,
  kind: 'disposal' as const,
  idempotencyKey: randomUUID(),
  parts: async () => ({ body: { line: 1, amount: '0.50', unit: '[qt_us]', why } }),
});

describe('appending an entry', () => {
  it('seals leaf, parts and a signed checkpoint that others can recompute', async () => {
    const { person, opening } = await openShelf();
    for (const why of ['spilt', 'old', 'given away']) await appendEntry(disposal(opening.log, person.id, why));
    const [stored] = await readStoredLogs([opening.log]);
    expect(stored?.entries.map(({ seq }) => seq)).toEqual([0, 1, 2, 3]);
    for (const [seq, row] of (stored?.entries ?? []).entries()) {
      const leaf = parseLeaf(row.leaf);
      expect(leafHash(row.leaf)).toBe(row.leafHash);
      expect(leaf).toMatchObject({ log: opening.log, seq, kind: row.kind, sealedAt: row.sealedAt });
      expect(leaf.previous).toBe(seq === 0 ? null : stored?.entries[seq - 1]?.leafHash);
      const parts = stored?.parts.filter((part) => part.seq === seq) ?? [];
      expect(parts.map(({ disclosure }) => openDisclosure(disclosure).digest)).toEqual(leaf.parts.map((p) => p.digest));
      const checkpoint = stored?.checkpoints[seq];
      const root = rootOf(stored?.entries.slice(0, seq + 1).map((entry) => entry.leafHash) ?? []);
      expect(checkpoint).toMatchObject({ size: seq + 1, root: toBase64(fromHex(root)) });
      const note = checkpoint?.note ?? '';
      expect(verifyNote(note, keyOfNote(note).verifierKey)).toBe(true);
      expect(parseCheckpoint(parseNote(note).text)).toMatchObject({ size: seq + 1, root, log: opening.log });
    }
    expect(issuedCheckpoint(opening.log)?.size).toBe(4);
  });

  it('stamps every checkpoint after the seal, by a job that is then done', async () => {
    const { person, opening } = await openShelf();
    await appendEntry(disposal(opening.log, person.id));
    await stampingSettled();
    const stamps = await tokens.all({ logId: opening.log }, { order: [['size', 'ASC']] });
    expect(stamps.map(({ size, isOwnAuthority }) => [size, isOwnAuthority])).toEqual([
      [1, true],
      [2, true],
    ]);
    expect((await stampJobs.all({ logId: opening.log })).every(({ doneAt }) => doneAt !== null)).toBe(true);
  });

  it('gives a retry the first result and makes no second entry', async () => {
    const { person, opening } = await openShelf();
    const options = disposal(opening.log, person.id);
    const first = await appendEntry(options);
    const again = await appendEntry({ ...options, parts: async () => ({ body: { name: 'something else' } }) });
    expect(first.isNew).toBe(true);
    expect(again).toEqual({ ...first, isNew: false });
    expect(await entries.count({ logId: opening.log })).toBe(2);
  });

  it('refuses a key that sealed another kind of entry', async () => {
    const { person, opening } = await openShelf();
    const options = disposal(opening.log, person.id);
    await appendEntry(options);
    await expect(appendEntry({ ...options, kind: 'purchase' })).rejects.toMatchObject({ code: 'conflict' });
  });

  it('gives the opening back when a log is opened twice', async () => {
    const person = await makePerson();
    const options = {
      subject: 'machine' as const,
      subjectId: randomUUID(),
      by: person.id,
      parts: async () => ({ body: { make: 'Corvane' } }),
    };
    const first = await openLog(options);
    expect(await openLog(options)).toEqual({ ...first, isNew: false });
  });

  it('numbers 200 entries sealed at once without a gap, each on the one before', async () => {
    const { person, opening } = await openShelf();
    const sealed = await Promise.all(Array.from({ length: 200 }, () => appendEntry(disposal(opening.log, person.id))));
    expect(sealed.map(({ seq }) => seq).sort((a, b) => a - b)).toEqual(Array.from({ length: 200 }, (_, i) => i + 1));
    const rows = await entries.all({ logId: opening.log }, { order: [['seq', 'ASC']] });
    expect(rows.slice(1).every((row, index) => row.previous === rows[index]?.leafHash)).toBe(true);
    const last = await checkpoints.find({ logId: opening.log, size: 201 });
    expect(last?.root).toBe(toBase64(fromHex(rootOf(rows.map((row) => row.leafHash)))));
    expect(issuedCheckpoint(opening.log)?.size).toBe(201);
  });

  it('keeps nothing when what goes with the entry fails', async () => {
    const { person, opening } = await openShelf();
    const failing = {
      ...disposal(opening.log, person.id),
      within: async () => {
        throw new Error('the lot is gone');
      },
    };
    await expect(appendEntry(failing)).rejects.toThrow('the lot is gone');
    expect(await entries.count({ logId: opening.log })).toBe(1);
    expect(await entryParts.count({ logId: opening.log })).toBe(1);
    expect(await checkpoints.count({ logId: opening.log })).toBe(1);
    expect((await appendEntry(disposal(opening.log, person.id))).seq).toBe(1);
  });

  it('brings text into its one normal form and leaves absent members out', async () => {
    const { person, opening } = await openShelf();
    const { seq } = await appendEntry({
      ...disposal(opening.log, person.id),
      parts: async () => ({ body: { why: 'Cafe\u0301\r\ntable', batch: undefined }, notes: undefined }),
    });
    const parts = await entryParts.all({ logId: opening.log, seq });
    expect(parts.map(({ disclosure }) => openDisclosure(disclosure).value)).toEqual([{ why: 'Café\ntable' }]);
  });

  it('refuses a text with a hidden direction mark and names its place', async () => {
    const { person, opening } = await openShelf();
    const options = {
      ...disposal(opening.log, person.id),
      parts: async () => ({ body: { lines: [{ product: 'Fernhill\u202E05-W02' }] } }),
    };
    await expect(appendEntry(options)).rejects.toMatchObject({
      code: 'invalid-input',
      fields: { 'body.lines.0.product': expect.stringContaining('Character 9') as string },
    });
    expect(await entries.count({ logId: opening.log })).toBe(1);
  });

  it('refuses a reference to an entry that is not there, and takes one that is', async () => {
    const { person, opening } = await openShelf();
    const strike = { ...disposal(opening.log, person.id), kind: 'strike' as const };
    const wrong = { ...strike, refersTo: { seq: 0, leafHash: '0'.repeat(64) } };
    await expect(appendEntry(wrong)).rejects.toMatchObject({ code: 'conflict' });
    const sealed = await appendEntry({ ...strike, refersTo: { seq: 0, leafHash: opening.leafHash } });
    expect((await entries.find({ logId: opening.log, seq: sealed.seq }))?.refersToSeq).toBe(0);
  });

  it('does not put an entry of a machine into a shelf’s log', async () => {
    const { person, opening } = await openShelf();
    const service = { ...disposal(opening.log, person.id), kind: 'service' as const };
    await expect(appendEntry(service)).rejects.toThrow('The log of a shelf has no entries of kind service.');
  });

  it('answers “not found” for a log that is not there', async () => {
    const { person } = await openShelf();
    await expect(appendEntry(disposal(randomUUID(), person.id))).rejects.toMatchObject({ code: 'not-found' });
  });
});

describe('the time of sealing', () => {
  const minute = 60_000;
  const start = Date.parse('2026-04-18T23:32:05.120Z');
  const sealAfter = async (milliseconds: number) => {
    const { person, opening } = await atTime(new Date(start), openShelf);
    return atTime(new Date(start + milliseconds), () => appendEntry(disposal(opening.log, person.id)));
  };

  it('is refused when the clock is more than five minutes behind the last entry', async () => {
    await expect(sealAfter(-5 * minute - 1)).rejects.toMatchObject({ code: 'clock-behind' });
  });

  it.each([-5 * minute, -5 * minute + 1, -1, 0])(
    'does not run backwards when the clock is off by %i ms',
    async (off) => {
      expect((await sealAfter(off)).sealedAt).toBe(new Date(start).toISOString());
    },
  );

  it('is the clock’s when the clock has gone on', async () => {
    expect((await sealAfter(1)).sealedAt).toBe(new Date(start + 1).toISOString());
  });

  it('marks a log for ever once a time in it was injected', async () => {
    const { person, opening } = await openShelf();
    expect((await findLog(opening.log))?.timesInjected).toBe(false);
    await atTime(new Date(Date.now() + minute), () => appendEntry(disposal(opening.log, person.id)));
    expect((await findLog(opening.log))?.timesInjected).toBe(true);
  });

  it('is the time of the stamp too under an injected clock', async () => {
    const { opening } = await atTime(new Date(start), openShelf);
    expect((await tokens.all({ logId: opening.log })).map(({ genTime }) => genTime)).toEqual([
      new Date(start).toISOString(),
    ]);
  });
});

describe('work done within the seal', () => {
  it('is committed with the entry and knows its number', async () => {
    const { person, opening } = await openShelf();
    const seen: number[] = [];
    const id = randomUUID();
    await appendEntry({
      ...disposal(opening.log, person.id),
      within: async (transaction, { seq }) => {
        seen.push(seq);
        const shelf = { id, name: 'Imke’s shelf', createdBy: person.id, createdAt: '2026-04-18T23:32:05.120Z' };
        await shelves.insert(shelf, { transaction });
      },
    });
    expect(seen).toEqual([1]);
    expect(await shelves.count({ id })).toBe(1);
  });
});
