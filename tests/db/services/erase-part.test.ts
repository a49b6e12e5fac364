import { spawnSync } from 'node:child_process';
import { randomUUID } from 'node:crypto';
import { existsSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { Readable } from 'node:stream';
import sharp from 'sharp';
import { beforeEach, describe, expect, it } from 'vitest';
import { databaseFile } from '@/db/index';
import { draftChanges, files, uploads } from '@/db/models/drafts';
import { entryParts, erasures } from '@/db/models/logs';
import { machines } from '@/db/models/machines';
import { findLogOf } from '@/db/queries/logs';
import { verifyBundle } from '@/lib/evidence/verify';
import { erasingNotes, noteErasing } from '@/lib/ports/erasing-notes';
import { blobPath } from '@/lib/ports/blob-store';
import { bundleRecord } from '@/lib/services/bundle-record';
import { confirmReceipt } from '@/lib/services/confirm-receipt';
import { eraseInput, erasePart } from '@/lib/services/erase-part';
import { finishAllErasing } from '@/lib/services/finish-erasing';
import { publishedKeys } from '@/lib/services/log-keys';
import { previewErasure } from '@/lib/services/preview-erasure';
import { readRecord, readShelf } from '@/lib/services/read-record';
import { readShelfLots } from '@/lib/services/read-shelf-lots';
import { receiveUpload } from '@/lib/services/receive-upload';
import { sealWorksheet } from '@/lib/services/seal-worksheet';
import { stampingSettled } from '@/lib/services/stamp-checkpoints';
import { strikeEntry } from '@/lib/services/strike-entry';
import { resetTestDatabase, useTestDatabase } from '../../setup/test-database';
import { draftWith, lendAHand, oilChange, receiptFields, riderWithMachine, typeInto } from './garage-story';

useTestDatabase();
beforeEach(resetTestDatabase);

const secret = 'Joost held the lamp, his new number is 0177-555-0199';
const input = (part: string, more: object = {}) =>
  eraseInput.parse({ part, word: 'erase', key: randomUUID(), ...more });

/** Everything SQLite keeps on the disk. */
function databaseBytes(): Buffer {
  const all = ['', '-wal', '-shm'].map((suffix) => databaseFile() + suffix).filter((file) => existsSync(file));
  return Buffer.concat(all.map((file) => readFileSync(file)));
}

async function sendPicture(options: {
  person: Parameters<typeof receiveUpload>[0]['person'];
  draft: string;
  colour: string;
}) {
  const { person, draft, colour } = options;
  const picture = await sharp({ create: { width: 320, height: 240, channels: 3, background: colour } }).jpeg().toBuffer(); // prettier-ignore
  const id = randomUUID();
  const answer = await receiveUpload({ person, query: { id, draft, name: 'at-home-of-joost.jpg' }, body: Readable.from([picture]) }); // prettier-ignore
  await typeInto({ person, draft, fields: { [`photos/${id}/role`]: 'odometer', [`photos/${id}/caption`]: 'Garage of Joost' } }); // prettier-ignore
  return answer;
}

/** A service with notes and a picture, entry 2, that drew from a receipt, line 1 of the shelf. */
async function riderWithService() {
  const rider = await riderWithMachine();
  const { person, machine, shelf } = rider;
  const receipt = await draftWith({ person, kind: 'receipt', subject: shelf, fields: receiptFields });
  const purchase = await confirmReceipt({ person, draftId: receipt });
  const fields = { ...oilChange(purchase), notes: secret };
  const draftId = await draftWith({ person, kind: 'worksheet', subject: machine, fields });
  await typeInto({ person, draft: draftId, fields: { notes: `${secret}, call him` } });
  const picture = await sendPicture({ person, draft: draftId, colour: '#334155' });
  const { seq } = await sealWorksheet({ person, draftId });
  await stampingSettled();
  const log = (await findLogOf(machine))!.id;
  const erase = (part: string, of = seq, more: object = {}) =>
    erasePart({ person, subject: { machine }, seq: of, input: input(part, more) });
  return { ...rider, log, seq, draftId, receipt, picture, erase };
}

async function verdicts(machineId: string): Promise<unknown[]> {
  await stampingSettled();
  const { text } = await bundleRecord({ machineId, purpose: 'Warranty claim', number: 'W-0001' });
  const own = verifyBundle({ bundleText: text, key: publishedKeys()[0]?.verifierKey });
  const folder = mkdtempSync(path.join(tmpdir(), 'erased-'));
  writeFileSync(path.join(folder, 'record.json'), text);
  const other = spawnSync('python3', ['tests/outside/independent_verifier.py', path.join(folder, 'record.json')]);
  rmSync(folder, { recursive: true });
  return [own.outcome, own.alterations, other.status];
}

describe('erasing a part', () => {
  it('leaves nothing of it in the files of the database, the salt included', async () => {
    const { log, seq, erase, draftId } = await riderWithService();
    const part = await entryParts.find({ logId: log, seq, name: 'notes' });
    const [salt] = JSON.parse(Buffer.from(part!.disclosure, 'base64url').toString('utf8')) as [string];
    const before = databaseBytes();
    expect([before.includes(part!.disclosure), before.includes(secret)]).toEqual([true, true]);
    await erase('notes');
    const after = databaseBytes();
    // The disclosure is base64url: any run of it that stands alone would give words or salt away.
    const pieces = [
      part!.disclosure,
      part!.disclosure.slice(8, 40),
      part!.disclosure.slice(-40),
      salt,
      secret,
      '0177-555',
    ];
    expect(pieces.filter((piece) => after.includes(piece))).toEqual([]);
    expect(await draftChanges.all({ draftId, field: 'notes' })).toEqual([]);
    expect(await draftChanges.count({ draftId })).toBeGreaterThan(10);
  });

  it('is recorded by an entry that does not say it again, and shown apart from what is withheld', async () => {
    const { machine, seq, erase } = await riderWithService();
    const { recordedSeq } = await erase('notes', seq, { reason: 'Asked for by the person named.' });
    const { entries } = await readRecord({ machineId: machine });
    expect(entries[seq]).toMatchObject({
      notes: null,
      withheld: [],
      erased: ['notes'],
      erasures: [{ name: 'notes', recordedSeq }],
    });
    expect(entries[recordedSeq]).toMatchObject({
      kind: 'addendum',
      refersTo: { seq },
      body: { text: 'Erased for good: the notes of entry 2. That this part was there can still be seen; what it said is gone. Reason given: Asked for by the person named.' },
    }); // prettier-ignore
  });

  it('leaves the record unchanged to this verifier and to another one', async () => {
    const { machine, erase } = await riderWithService();
    for (const part of ['notes', 'author', 'attachments']) await erase(part);
    await erase('identity', 0);
    expect(await verdicts(machine)).toEqual(['unchanged', [], 0]);
  });

  it('takes the pictures off the disk, their names and captions too, and leaves those another draft uses', async () => {
    const { person, machine, seq, erase, picture } = await riderWithService();
    const other = await draftWith({ person, kind: 'worksheet', subject: machine, fields: {} });
    const shared = await sendPicture({ person, draft: other, colour: '#aa3311' });
    const third = await draftWith({ person, kind: 'addendum', subject: machine, refersToSeq: seq, fields: {} });
    await sendPicture({ person, draft: third, colour: '#aa3311' });
    const hashes = [picture.sha256, picture.copySha256!, picture.thumbSha256!];
    expect(hashes.map((hash) => existsSync(blobPath(hash)))).toEqual([true, true, true]);
    await erase('attachments');
    expect(hashes.map((hash) => existsSync(blobPath(hash)))).toEqual([false, false, false]);
    expect(await files.all({ sha256: hashes })).toEqual([]);
    expect(await uploads.count()).toBe(2);
    expect(existsSync(blobPath(shared.sha256))).toBe(true);
  });

  it('keeps a file that is attached to another entry as well, until that is erased too', async () => {
    const { person, machine, erase, picture } = await riderWithService();
    const draftId = await draftWith({ person, kind: 'worksheet', subject: machine, fields: withoutDraws });
    const again = await sendPicture({ person, draft: draftId, colour: '#334155' });
    expect(again.sha256).toBe(picture.sha256);
    const later = await sealWorksheet({ person, draftId });
    await erase('attachments');
    expect(existsSync(blobPath(picture.sha256))).toBe(true);
    await erase('attachments', later.seq);
    expect(existsSync(blobPath(picture.sha256))).toBe(false);
  });

  it('takes VIN and numbers out of the machine’s own line', async () => {
    const { machine, erase } = await riderWithService();
    await erase('identity', 0);
    expect(await machines.find({ id: machine })).toMatchObject({ vin: null, engineNumber: null, make: 'Corvane' });
    expect(databaseBytes().includes('AAACRVSR3NA000417')).toBe(false);
  });

  it('of a receipt is recorded by a correction that takes nothing from its lots', async () => {
    const { person, machine, shelf } = await riderWithService();
    const lots = (await readShelfLots({ person, shelf })).lots.map(({ balance }) => balance);
    for (const part of ['prices', 'supplier'])
      await erasePart({ person, subject: { shelf }, seq: 1, input: input(part) });
    const { entries } = await readShelf({ shelfId: shelf });
    expect(entries.map(({ kind }) => kind)).toEqual(['opening', 'purchase', 'correction', 'correction']);
    expect(entries[2]?.body).toEqual({ why: 'Erased for good: the prices of line 1. That this part was there can still be seen; what it said is gone.' }); // prettier-ignore
    expect(entries[1]?.purchase).toMatchObject({
      prices: null,
      supplier: null,
      erasures: [{ name: 'prices' }, { name: 'supplier' }],
    });
    expect((await readShelfLots({ person, shelf })).lots.map(({ balance }) => balance)).toEqual(lots);
    const bytes = databaseBytes();
    expect(['8994', '89,94', '12.99', 'Brandywell'].filter((word) => bytes.includes(word))).toEqual([]);
    expect(await verdicts(machine)).toEqual(['unchanged', [], 0]);
  });
});

const withoutDraws = {
  'startedAt/date': '2025-11-02', 'startedAt/time': '10:00', 'finishedAt/date': '2025-11-02', 'finishedAt/time': '10:30',
  zone: 'America/Denver', 'odometer/value': '10300', 'odometer/unit': '[mi_i]', 'tasks/t1/key': 'battery',
}; // prettier-ignore

describe('what keeps from erasing', () => {
  it('is a part that was never there, is gone already, or is the body', async () => {
    const { seq, erase } = await riderWithService();
    await expect(erase('prices')).rejects.toMatchObject({ code: 'conflict', message: /holds no prices/ });
    const { recordedSeq } = await erase('notes');
    await expect(erase('notes')).rejects.toMatchObject({
      code: 'conflict',
      message: `This is erased already, as recorded in ${recordedSeq}.`,
    });
    expect(eraseInput.safeParse({ part: 'body', word: 'erase', key: randomUUID() }).success).toBe(false);
    expect(seq).toBe(2);
  });

  it('is a word not typed out', () => {
    const given = { part: 'notes', key: randomUUID() };
    expect(['', 'eras', 'yes'].map((word) => eraseInput.safeParse({ ...given, word }).success)).toEqual([
      false,
      false,
      false,
    ]);
    expect(eraseInput.safeParse({ ...given, word: ' Erase ' }).success).toBe(true);
  });

  it('is being a helper', async () => {
    const { machine, seq } = await riderWithService();
    const helper = await lendAHand(machine);
    const asHelper = { person: helper, subject: { machine }, seq };
    await expect(erasePart({ ...asHelper, input: input('notes') })).rejects.toMatchObject({ code: 'not-found' });
    await expect(previewErasure(asHelper)).rejects.toMatchObject({ code: 'not-found' });
  });

  it('is done once however often the form is sent', async () => {
    const { person, machine, seq } = await riderWithService();
    const given = input('notes');
    const answers = await Promise.all(
      [1, 2, 3].map(() => erasePart({ person, subject: { machine }, seq, input: given })),
    );
    expect(answers.filter(({ isNew }) => isNew)).toHaveLength(1);
    expect(await erasures.count()).toBe(1);
    expect((await previewErasure({ person, subject: { machine }, seq })).parts).toEqual(['author', 'attachments']);
  });

  it('cannot be undone by striking the entry that records it', async () => {
    const { person, machine, erase } = await riderWithService();
    const { recordedSeq } = await erase('notes');
    const strike = { reason: 'I want it back.', key: randomUUID() };
    await expect(strikeEntry({ person, subject: { machine }, seq: recordedSeq, input: strike })).rejects.toMatchObject({
      code: 'conflict',
      message: /cannot come back/,
    });
  });
});

describe('an erasure that was interrupted', () => {
  it('is finished at the next start: files no row names go, others stay', async () => {
    const { picture, log, seq } = await riderWithService();
    // As if the process had ended right after the commit.
    await uploads.remove({ sha256: picture.sha256 });
    await files.remove({ sha256: picture.sha256 });
    const kept = picture.copySha256!;
    await noteErasing({ id: randomUUID(), files: [picture.sha256, kept] });
    await finishAllErasing();
    expect([existsSync(blobPath(picture.sha256)), existsSync(blobPath(kept))]).toEqual([false, true]);
    expect(await erasingNotes()).toEqual([]);
    expect(await entryParts.count({ logId: log, seq })).toBe(4);
  });
});
