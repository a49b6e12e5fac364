import { execFileSync, spawnSync } from 'node:child_process';
import { randomUUID } from 'node:crypto';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { Readable } from 'node:stream';
import sharp from 'sharp';
import { beforeEach, describe, expect, it } from 'vitest';
import type { PersonRow } from '@/db/models/people';
import { forSaleScope, usualScope, type Scope } from '@/lib/domain/scope';
import { scopeEffect } from '@/lib/domain/scope-effect';
import { openDisclosure } from '@/lib/evidence/disclosure';
import type { Attachment, Bundle } from '@/lib/evidence/format';
import { verifyBundle } from '@/lib/evidence/verify';
import { nameFiles } from '@/lib/packet/content';
import { blobStore } from '@/lib/ports/blob-store';
import { blackOutInput, blackOutPicture } from '@/lib/services/black-out-picture';
import { buildPacket, packetFile } from '@/lib/services/build-packet';
import { bundleRecord } from '@/lib/services/bundle-record';
import { confirmReceipt } from '@/lib/services/confirm-receipt';
import { eraseInput, erasePart } from '@/lib/services/erase-part';
import type { LogSubject } from '@/lib/services/log-of-owner';
import { publishedKeys } from '@/lib/services/log-keys';
import { readFileOf } from '@/lib/services/read-file';
import { readRecordFile } from '@/lib/services/read-record-file';
import { readRecord, readShelf } from '@/lib/services/read-record';
import { queuePacket } from '@/lib/services/request-packet';
import { receiveUpload } from '@/lib/services/receive-upload';
import { sealWorksheet } from '@/lib/services/seal-worksheet';
import { stampingSettled } from '@/lib/services/stamp-checkpoints';
import { strikeEntry, strikeInput } from '@/lib/services/strike-entry';
import { whatCanBeOpened } from '@/lib/services/what-can-be-opened';
import { makePerson, resetTestDatabase, useTestDatabase } from '../../setup/test-database';
import { draftWith, lendAHand, oilChange, receiptFields, riderWithMachine, typeInto } from './garage-story';

useTestDatabase();
beforeEach(resetTestDatabase);

const box = { left: 0.25, top: 0.25, width: 0.25, height: 0.25 };
const input = (picture: string, more: object = {}) =>
  blackOutInput.parse({ picture, boxes: JSON.stringify([box]), reason: '', key: randomUUID(), ...more });

async function sendPicture(person: PersonRow, draft: string, role: string, colour: string): Promise<void> {
  const picture = await sharp({ create: { width: 320, height: 240, channels: 3, background: colour } }).jpeg().toBuffer(); // prettier-ignore
  const id = randomUUID();
  await receiveUpload({ person, query: { id, draft, name: 'photo.jpg' }, body: Readable.from([picture]) });
  await typeInto({ person, draft, fields: { [`photos/${id}/role`]: role } });
}

/** A receipt with its picture, line 1 of the shelf; a service that drew from it, with a picture, entry 2. */
async function riderWithPictures() {
  const rider = await riderWithMachine();
  const { person, machine, shelf } = rider;
  const receipt = await draftWith({ person, kind: 'receipt', subject: shelf, fields: receiptFields });
  await sendPicture(person, receipt, 'receipt-front', '#f5f5f4');
  const purchase = await confirmReceipt({ person, draftId: receipt });
  const draftId = await draftWith({ person, kind: 'worksheet', subject: machine, fields: oilChange(purchase) });
  await sendPicture(person, draftId, 'as-found', '#7f1d1d');
  const { seq } = await sealWorksheet({ person, draftId });
  const { entries } = await readShelf({ shelfId: shelf });
  const bought = entries[purchase.seq]!.purchase!.attachments[0]!;
  const found = (await readRecord({ machineId: machine })).entries[seq]!.attachments[0]!;
  const copyOf = ({ copy }: Attachment) => copy!.sha256;
  const black = (subject: LogSubject, of: number, picture: string, more: object = {}) =>
    blackOutPicture({ person, subject, seq: of, input: input(picture, more) });
  return { ...rider, purchase, seq, oldReceipt: copyOf(bought), oldFound: copyOf(found), black };
}

async function judged(machineId: string, scope: Scope) {
  await stampingSettled();
  const { text, bundle } = await bundleRecord({ machineId, purpose: '', number: 'W-0001', scope });
  const own = verifyBundle({ bundleText: text, key: publishedKeys()[0]?.verifierKey });
  const folder = mkdtempSync(path.join(tmpdir(), 'black-'));
  const file = path.join(folder, 'record.json');
  writeFileSync(file, text);
  const other = spawnSync('python3', ['tests/outside/independent_verifier.py', file], { encoding: 'utf8' });
  rmSync(folder, { recursive: true });
  const made = own.remarks.filter(({ code }) => code === 'copy-by-installation').map(({ sentence }) => sentence);
  return { bundle, made, verdicts: [own.alterations, own.outcome, other.status] };
}
const namedIn = ({ files }: Bundle) => files.map(({ sha256 }) => sha256);
const namesOpened = ({ logs }: Bundle) =>
  logs.flatMap(({ entries }) => entries.flatMap(({ parts }) => parts.map((one) => openDisclosure(one).name)));

describe('blacking out a picture of an entry', () => {
  it('seals an addendum with a copy that is black there, and leaves the picture as it is', async () => {
    const { machine, seq, oldFound, black } = await riderWithPictures();
    const before = await blobStore.read(oldFound);
    const sealed = await black({ machine }, seq, oldFound, { reason: 'A number plate.' });
    const { entries } = await readRecord({ machineId: machine });
    const addendum = entries[sealed.seq]!;
    expect(addendum).toMatchObject({
      kind: 'addendum',
      refersTo: { seq },
      body: { text: `Blacked-out copy of As found of entry ${seq}. A number plate.` },
      attachments: [{ role: 'as-found', caption: `Blacked-out copy of SHA-256 ${oldFound}`, mediaType: 'image/jpeg' }],
    });
    const [made] = addendum.attachments;
    expect(made?.copy).toEqual({ sha256: made?.sha256, bytes: made?.bytes, mediaType: 'image/jpeg', removed: [] });
    const { data, info } = await sharp(await blobStore.read(made!.sha256)).raw().toBuffer({ resolveWithObject: true }); // prettier-ignore
    const at = (x: number, y: number) => [...data.subarray((y * info.width + x) * 3, (y * info.width + x) * 3 + 3)];
    expect(at(120, 90)).toEqual([0, 0, 0]);
    expect(at(20, 20)[0]).toBeGreaterThan(100);
    expect((await blobStore.read(oldFound)).equals(before)).toBe(true);
    expect(entries[seq]?.attachments[0]?.copy?.sha256).toBe(oldFound);
    for (const kind of ['thumb', 'plate', 'copy'] as const) {
      expect((await readFileOf({ subject: machine, sha256: made!.sha256, kind })).headers['Content-Type']).toMatch(/^image/); // prettier-ignore
    }
  });

  it('seals once, however often the button is pressed', async () => {
    const { person, machine, seq, oldFound } = await riderWithPictures();
    const press = { person, subject: { machine }, seq, input: input(oldFound) };
    const results = await Promise.all([blackOutPicture(press), blackOutPicture(press)]);
    results.push(await blackOutPicture(press));
    expect(new Set(results.map((one) => one.seq))).toEqual(new Set([seq + 1]));
    expect(results.filter(({ isNew }) => isNew)).toHaveLength(1);
    expect((await readRecord({ machineId: machine })).entries).toHaveLength(seq + 2);
  });

  it('refuses a picture that the entry does not hold, and whoever is no owner', async () => {
    const { machine, shelf, seq, oldFound, oldReceipt, black, person } = await riderWithPictures();
    await expect(black({ machine }, seq, oldReceipt)).rejects.toMatchObject({ code: 'conflict' });
    await expect(black({ machine }, 0, oldFound)).rejects.toThrow('Entry 0 holds no such picture');
    await expect(black({ shelf }, 1, oldFound)).rejects.toThrow('Line 1 holds no such picture');
    await expect(black({ machine }, 99, oldFound)).rejects.toMatchObject({ code: 'not-found' });
    const helper = await lendAHand(machine);
    const stranger = await makePerson({ name: 'Teodora Lindqvist' });
    for (const other of [helper, stranger]) {
      const asked = blackOutPicture({ person: other, subject: { machine }, seq, input: input(oldFound) });
      await expect(asked).rejects.toMatchObject({ code: expect.stringMatching(/^(not-found|forbidden)$/) });
    }
    await erasePart({ person, subject: { machine }, seq, input: eraseInput.parse({ part: 'attachments', word: 'erase', key: randomUUID() }) }); // prettier-ignore
    await expect(black({ machine }, seq, oldFound)).rejects.toMatchObject({ code: 'conflict' });
    expect((await readRecord({ machineId: machine })).entries).toHaveLength(seq + 2);
  });

  it.each([
    ['no box', '[]', /at least one box/],
    ['no list at all', 'black', /at least one box/],
    ['51 boxes', JSON.stringify(Array.from({ length: 51 }, () => box)), /At most 50/],
  ])('refuses %s', (_title, boxes, sentence) => {
    const result = blackOutInput.safeParse({ picture: 'ab'.repeat(32), boxes, key: randomUUID() });
    expect(result.error?.issues[0]?.message).toMatch(sentence);
  });

  it('refuses a box beside the picture, and seals nothing', async () => {
    const { machine, seq, oldFound, black } = await riderWithPictures();
    const boxes = JSON.stringify([box, { ...box, left: 1.5 }]);
    await expect(black({ machine }, seq, oldFound, { boxes })).rejects.toHaveProperty('fields.boxes');
    expect((await readRecord({ machineId: machine })).entries).toHaveLength(seq + 1);
  });
});

describe('what readers get of blacked-out pictures', () => {
  it('is the copy beside the picture where pictures are open, as made from it, to both verifiers', async () => {
    const { machine, shelf, seq, purchase, oldFound, oldReceipt, black } = await riderWithPictures();
    await black({ machine }, seq, oldFound);
    const onShelf = await black({ shelf }, purchase.seq, oldReceipt);
    const { bundle, made, verdicts } = await judged(machine, usualScope);
    expect(verdicts).toEqual([[], 'unchanged', 0]);
    expect(bundle.files.flatMap(({ derivedFrom }) => derivedFrom ?? []).sort()).toEqual([oldFound, oldReceipt].sort());
    expect(made).toHaveLength(2);
    expect(made.join()).toContain(`sealed in entry ${seq + 1}.`);
    expect(made.join()).toContain(`sealed in line ${onShelf.seq} of the shelf’s log.`);
  });

  it('is the copy alone for sale: no old picture of the receipt in bundle, packet or by its address', async () => {
    const { person, machine, shelf, purchase, oldReceipt, black } = await riderWithPictures();
    const before = await readRecord({ machineId: machine, scope: forSaleScope });
    expect(before.shelves[0]?.purchases[0]).toMatchObject({ attachments: [], corrections: [] });
    const sealed = await black({ shelf }, purchase.seq, oldReceipt, { reason: 'What it cost.' });
    const { bundle, made, verdicts } = await judged(machine, forSaleScope);
    expect(verdicts).toEqual([[], 'unchanged', 0]);
    const record = await readRecord({ machineId: machine, scope: forSaleScope });
    const [shown] = record.shelves[0]?.purchases ?? [];
    expect(shown).toMatchObject({
      attachments: [],
      corrections: [
        { seq: sealed.seq, why: 'Blacked-out copy of Receipt, front of line 1. What it cost.', author: null },
      ],
    });
    const copy = shown!.corrections[0]!.attachments[0]!.sha256;
    expect(namedIn(bundle)).toContain(copy);
    expect(namedIn(bundle)).not.toContain(oldReceipt);
    // What it was made from stays closed, so it is not pointed at, and there is nothing to remark.
    expect(bundle.files.find(({ sha256 }) => sha256 === copy)?.derivedFrom).toBeNull();
    expect(made).toEqual([]);
    expect([...nameFiles(record)].map(([sha256]) => sha256)).toContain(copy);
    const asReader = (sha256: string) =>
      readRecordFile({ machineId: machine, sha256, kind: 'plate', scope: forSaleScope });
    expect((await asReader(copy)).headers['Content-Type']).toBe('image/jpeg');
    await expect(asReader(oldReceipt)).rejects.toMatchObject({ code: 'not-found' });
    // The form that makes the link counts the same pictures and texts.
    const { lines, purchases } = await whatCanBeOpened({ person, machineId: machine });
    const counted = record.entries.reduce((sum, one) => sum + one.attachments.length, 1);
    expect(scopeEffect(forSaleScope, lines, purchases).pictures).toBe(counted);
  });

  it('is the copy alone in a packet for sale, drawn, attached and said in words', async () => {
    const { person, machine, shelf, purchase, oldReceipt, black } = await riderWithPictures();
    await black({ shelf }, purchase.seq, oldReceipt, { reason: 'What it cost.' });
    await stampingSettled();
    const queued = await queuePacket({ machineId: machine, by: person.id, purpose: '', scope: forSaleScope });
    await buildPacket(queued);
    // poppler reads the words and lists the attached files.
    const file = packetFile(queued.number);
    const words = execFileSync('pdftotext', ['-layout', file, '-'], { encoding: 'utf8' }).replaceAll(/\s+/g, ' ');
    expect(words).toContain('“Blacked-out copy of Receipt, front of line 1. What it cost.” Line 2 of the shelf’s log');
    expect(words).toContain('Blacked-out copy, made here');
    const attached = execFileSync('pdfdetach', ['-list', file], { encoding: 'utf8' });
    expect(attached).toMatch(/receipt-2-1-receipt-front-[0-9a-f]{8}\.jpg/);
    expect(attached).not.toContain(oldReceipt.slice(0, 8));
    expect(spawnSync('node', ['scripts/verify.mjs', file]).status).toBe(0);
  });

  it('is the copy alone where the pictures of the work are closed, and nothing once it is struck', async () => {
    const { person, machine, seq, oldFound, black } = await riderWithPictures();
    const sealed = await black({ machine }, seq, oldFound);
    const closed: Scope = { closed: ['prices', 'pictures'] };
    const shown = async () =>
      (await readRecord({ machineId: machine, scope: closed })).entries[sealed.seq]!.attachments;
    expect((await readRecord({ machineId: machine, scope: closed })).entries[seq]?.attachments).toEqual([]);
    expect(await shown()).toHaveLength(1);
    const again = await black({ machine }, sealed.seq, (await shown())[0]!.sha256);
    expect((await readRecord({ machineId: machine, scope: closed })).entries[again.seq]?.attachments).toHaveLength(1);
    const strike = strikeInput.parse({ reason: 'It covers too little.', key: randomUUID() });
    await strikeEntry({ person, subject: { machine }, seq: sealed.seq, input: strike });
    expect(await shown()).toEqual([]);
    expect((await judged(machine, closed)).verdicts).toEqual([[], 'unchanged', 0]);
  });

  it('is gone with its file once its part is erased, and the picture it was made from stays', async () => {
    const { person, shelf, purchase, oldReceipt, black } = await riderWithPictures();
    const sealed = await black({ shelf }, purchase.seq, oldReceipt);
    const { entries } = await readShelf({ shelfId: shelf });
    const copy = entries[purchase.seq]!.purchase!.corrections[0]!.attachments[0]!.sha256;
    const erase = eraseInput.parse({ part: 'attachments', word: 'erase', key: randomUUID() });
    await erasePart({ person, subject: { shelf }, seq: sealed.seq, input: erase });
    expect([await blobStore.has(copy), await blobStore.has(oldReceipt)]).toEqual([false, true]);
  });
});

describe('what a shelf’s log says of a purchase later', () => {
  it('reaches readers: that it was struck, and what was erased', async () => {
    const { person, machine, shelf, seq, purchase } = await riderWithPictures();
    const erase = eraseInput.parse({ part: 'supplier', word: 'erase', key: randomUUID() });
    await erasePart({ person, subject: { shelf }, seq: purchase.seq, input: erase });
    const strike = (subject: LogSubject, of: number, reason: string) =>
      strikeEntry({ person, subject, seq: of, input: strikeInput.parse({ reason, key: randomUUID() }) });
    await strike({ machine }, seq, 'Another machine.');
    const struck = await strike({ shelf }, purchase.seq, 'Another person’s receipt.');
    const { bundle, verdicts } = await judged(machine, usualScope);
    expect(verdicts).toEqual([[], 'unchanged', 0]);
    expect(namesOpened(bundle).filter((name) => name === 'supplier')).toEqual([]);
    const record = await readRecord({ machineId: machine });
    expect(record.shelves[0]?.purchases[0]).toMatchObject({
      supplier: null,
      withheld: ['prices'],
      erasures: [{ name: 'supplier' }],
      struckBy: { seq: struck.seq, reason: 'Another person’s receipt.', by: person.name },
      corrections: [{ why: expect.stringMatching(/^Erased for good: the supplier of line 1/) }],
    });
  });
});
