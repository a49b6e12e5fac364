import { existsSync, mkdirSync, readdirSync, readFileSync, rmSync, utimesSync } from 'node:fs';
import { randomUUID } from 'node:crypto';
import path from 'node:path';
import { Readable } from 'node:stream';
import sharp from 'sharp';
import { beforeAll, describe, expect, it } from 'vitest';
import { importedRecords } from '@/db/models/proof';
import { findEntry } from '@/db/queries/entries';
import { findLogOf } from '@/db/queries/logs';
import type { PersonRow } from '@/db/queries/people';
import { env } from '@/lib/env';
import { readContainer } from '@/lib/evidence/container';
import { sha256Hex } from '@/lib/evidence/hash';
import { appendEntry } from '@/lib/services/append-entry';
import { backUp } from '@/lib/services/back-up';
import { exportRecord } from '@/lib/services/export-record';
import { keepImport } from '@/lib/services/keep-import';
import { publishedKeys } from '@/lib/services/log-keys';
import { readImported, readStaged, listImports } from '@/lib/services/read-imported';
import { openImportedFile, readImportedPicture } from '@/lib/services/read-imported-file';
import { receiveImport } from '@/lib/services/receive-import';
import { recheckImport } from '@/lib/services/recheck-import';
import { discardImport, removeImport } from '@/lib/services/remove-import';
import { stampingSettled } from '@/lib/services/stamp-checkpoints';
import { buildProofWorld } from '@/tests/setup/proof-world';
import { makePerson, useTestDatabase } from '@/tests/setup/test-database';
import { buildZip } from '@/tests/unit/evidence/build-zip';
import {
  attacker,
  givenFiles,
  keyOf,
  listedReceipt,
  buildRecord,
  signedText,
  unsignedBundle,
} from '@/tests/unit/evidence/build-record';

useTestDatabase();

let world: Awaited<ReturnType<typeof buildProofWorld>>;
let zip: Buffer;
let other: PersonRow;
beforeAll(async () => {
  world = await buildProofWorld();
  await stampingSettled();
  zip = await exported();
  other = await makePerson({ name: 'A buyer' });
});

async function exported(): Promise<Buffer> {
  const { body } = await exportRecord({ person: world.person, machineId: world.machine, files: 'originals' });
  return read(body);
}
async function read(body: AsyncIterable<Uint8Array>): Promise<Buffer> {
  const pieces: Uint8Array[] = [];
  for await (const piece of body) pieces.push(piece);
  return Buffer.concat(pieces);
}
async function sealAddendum(): Promise<void> {
  const { log, seq, leafHash } = await findService();
  await appendEntry({
    log,
    kind: 'addendum',
    by: world.person.id,
    idempotencyKey: randomUUID(),
    refersTo: { seq, leafHash },
    parts: async () => ({
      author: { person: world.person.id, name: world.person.name, role: 'owner' },
      body: { text: 'The drain plug was dry a week later.' },
    }),
  });
}
async function findService() {
  const log = (await findLogOf(world.machine))!.id;
  return { log, seq: world.seq, leafHash: (await findEntry(log, world.seq))!.leafHash };
}
const send = (bytes: Uint8Array, person = other, fileName = 'export.zip') =>
  receiveImport({ person, fileName, body: Readable.from([bytes]), declaredBytes: bytes.length });
async function kept(bytes: Uint8Array, person = other): Promise<string> {
  return (await keepImport({ person, id: (await send(bytes, person)).id })).id;
}
const waiting = () => readdirSync(path.join(env.dataFolder, 'imports', 'incoming'));

describe('an export that is brought in', () => {
  it('is shown with what was found before it is kept', async () => {
    const { id } = await send(zip);
    const staged = await readStaged({ person: other, id });
    expect(staged).toMatchObject({ mayBeKept: true, sameAs: null, name: '2022 Corvane Sorrel 1800' });
    expect(staged.note.finding).toMatchObject({ outcome: 'unchanged', alterations: [] });
    expect(staged.note.finding.remarks.map(({ code }) => code)).toContain('key-from-file');
    expect(await listImports(other)).toEqual([]);
    await discardImport({ person: other, id });
    expect(waiting()).toEqual([]);
  });

  it('has the same entries and the same files as where it came from, and its pictures decode', async () => {
    const id = await kept(zip);
    const imported = await readImported({ person: other, id });
    const { bundleText, files } = await readContainer(zip);
    expect(imported.recordText).toBe(bundleText);
    expect(imported.row).toMatchObject({ outcome: 'unchanged', fileSha256: sha256Hex(zip), bytes: zip.length });
    const beside = files!.filter(({ isCompanion }) => isCompanion !== true);
    expect([...imported.files.keys()].sort()).toEqual(beside.map(({ bytes }) => sha256Hex(bytes)).sort());
    for (const kind of ['thumb', 'plate'] as const) {
      // Twice: the second time from what was made the first time.
      for (let time = 0; time < 2; time += 1) {
        const { body, headers } = await readImportedPicture({ person: other, id, sha256: world.odometer, kind });
        expect(await sharp(body).metadata()).toMatchObject({ width: 320, height: 240 });
        expect(headers).toMatchObject({ 'Content-Disposition': 'inline', 'X-Content-Type-Options': 'nosniff' });
        expect(headers['Content-Security-Policy']).toContain('sandbox');
      }
    }
    const file = await openImportedFile({ person: other, id });
    expect(Buffer.compare(await read(file.body), zip)).toBe(0);
    await removeImport({ person: other, id });
  });

  it('is nobody else’s, neither waiting nor kept', async () => {
    const { id } = await send(zip);
    for (const person of [world.person, await makePerson({ isSteward: true })]) {
      await expect(readStaged({ person, id })).rejects.toMatchObject({ code: 'not-found' });
      await expect(keepImport({ person, id })).rejects.toMatchObject({ code: 'not-found' });
      await expect(discardImport({ person, id })).rejects.toMatchObject({ code: 'not-found' });
    }
    await keepImport({ person: other, id });
    for (const work of [readImported, removeImport, openImportedFile]) {
      await expect(work({ person: world.person, id })).rejects.toMatchObject({ code: 'not-found' });
    }
    const picture = { id, sha256: world.odometer, kind: 'thumb' as const };
    await expect(readImportedPicture({ person: world.person, ...picture })).rejects.toMatchObject({ code: 'not-found' });
    await removeImport({ person: other, id });
    await expect(readImported({ person: other, id })).rejects.toMatchObject({ code: 'not-found' });
    expect(existsSync(path.join(env.dataFolder, 'imports', id))).toBe(false);
  }); // prettier-ignore

  it('a second time is pointed out, and kept once', async () => {
    const id = await kept(zip);
    const again = (await send(zip)).id;
    expect((await readStaged({ person: other, id: again })).sameAs?.id).toBe(id);
    await expect(keepImport({ person: other, id: again })).rejects.toThrow('this very file already');
    expect(await listImports(other)).toHaveLength(1);
    await removeImport({ person: other, id });
  });

  it('that goes on from one that is kept is said to continue it', async () => {
    const id = await kept(zip);
    await sealAddendum();
    await stampingSettled();
    const newer = (await send(await exported())).id;
    const { compared } = (await readStaged({ person: other, id: newer })).note;
    expect(compared).toMatchObject({ id, comparison: { result: 'consistent', notes: [] } });
    // The other way round, the older one is short of the newer, and no past is in doubt.
    await keepImport({ person: other, id: newer });
    await removeImport({ person: other, id });
    const older = (await readStaged({ person: other, id: (await send(zip)).id })).note;
    expect(older.finding.outcome).toBe('unchanged');
    expect(older.compared?.comparison.result).toBe('shorter');
    await removeImport({ person: other, id: newer });
  });

  it('that tells another past is shown as contradicting it, and may be kept: both are evidence', async () => {
    const record = buildRecord();
    const fork = record.machine.fork();
    record.machine.append({ kind: 'addendum', sealedAt: '2026-05-01T08:00:00.000Z', refersTo: record.service, parts: { body: { text: 'One' } } });
    fork.append({ kind: 'addendum', sealedAt: '2026-05-01T08:00:00.000Z', refersTo: record.service, parts: { body: { text: 'Two' } } });
    const of = (machine: typeof fork) =>
      buildZip([{ name: 'record.json', bytes: Buffer.from(signedText(unsignedBundle({ ...record, machine }))) }, ...givenFiles]);
    const id = await kept(of(record.machine));
    const forked = (await send(of(fork))).id;
    const staged = await readStaged({ person: other, id: forked });
    expect(staged.note.compared?.comparison).toMatchObject({ result: 'forked', notes: [{}] });
    expect(staged.mayBeKept).toBe(true);
    await keepImport({ person: other, id: forked });
    for (const one of [id, forked]) await removeImport({ person: other, id: one });
  }); // prettier-ignore

  it('can be checked with a key from elsewhere, and is refused with one that did not sign it', async () => {
    const { id } = await send(zip);
    await expect(recheckImport({ person: other, id, key: 'nonsense' })).rejects.toMatchObject({
      code: 'invalid-input',
      fields: { key: expect.stringContaining('Copy it whole') },
    });
    await recheckImport({ person: other, id, key: publishedKeys()[0]!.fingerprint });
    const { finding } = (await readStaged({ person: other, id })).note;
    expect(finding.key?.source).toBe('reader');
    expect(finding.remarks.map(({ code }) => code)).not.toContain('key-from-file');
    await recheckImport({ person: other, id, key: keyOf(attacker) });
    expect((await readStaged({ person: other, id })).mayBeKept).toBe(false);
    await expect(keepImport({ person: other, id })).rejects.toThrow('not what was sealed');
  });

  it('goes into a backup, and what waits for a decision does not', async () => {
    const id = await kept(zip);
    await send(zip);
    const to = path.join(env.dataFolder, '..', `backup-${randomUUID()}`);
    await backUp({ to });
    expect(readFileSync(path.join(to, 'imports', id, 'export.zip')).equals(zip)).toBe(true);
    expect(readdirSync(path.join(to, 'imports'))).toEqual([id]);
    rmSync(to, { recursive: true });
    await removeImport({ person: other, id });
  });
});

describe('is not kept', () => {
  it('one whose picture was changed: it is named, and the file is gone from the server', async () => {
    const { files, bundleText } = await readContainer(zip);
    const forged = buildZip([
      { name: 'record.json', bytes: Buffer.from(bundleText) },
      ...files!.map(({ name, bytes }) => ({ name, bytes: name.startsWith('originals/2-') ? bytes.slice(1) : bytes })),
    ]);
    const { id } = await send(forged);
    const { mayBeKept, note } = await readStaged({ person: other, id });
    expect(mayBeKept).toBe(false);
    expect(note.finding.alterations.map(({ code }) => code)).toEqual(['file-changed']);
    await expect(keepImport({ person: other, id })).rejects.toMatchObject({ code: 'conflict' });
    expect(readdirSync(path.join(env.dataFolder, 'imports', 'incoming', id))).toEqual(['found.json']);
  });

  it.each([
    ['a ZIP with something behind its end', () => Buffer.concat([zip, Buffer.from('x')])],
    ['half a ZIP', () => zip.subarray(0, zip.length / 2)],
    ['a ZIP without a record', () => buildZip([{ name: 'a.txt', bytes: Buffer.from('a') }])],
    ['a ZIP with two records', () => buildZip(['record.json', 'a/record.json'].map((name) => ({ name, bytes: Buffer.from('{}') })))],
    ['a ZIP whose record is none', () => buildZip([{ name: 'record.json', bytes: Buffer.from('{}') }])],
  ])('%s: the finding is a sentence', async (_, bytes) => {
    const { id } = await send(bytes());
    const { mayBeKept, note } = await readStaged({ person: other, id });
    expect(mayBeKept).toBe(false);
    expect(note.finding.outcome).toBe('unreadable');
    expect(note.finding.sentence).toMatch(/\.$/);
  }); // prettier-ignore

  it('what is no ZIP, what came short, and what says that it is too large', async () => {
    await expect(send(Buffer.from('%PDF-1.7'))).rejects.toMatchObject({ code: 'unsupported-file' });
    await expect(send(Buffer.alloc(0))).rejects.toMatchObject({ code: 'unsupported-file' });
    const options = { person: other, fileName: 'a.zip', body: Readable.from([zip]) };
    await expect(receiveImport({ ...options, declaredBytes: zip.length + 1 })).rejects.toThrow('did not arrive whole');
    await expect(receiveImport({ ...options, declaredBytes: 1_000_000_001 })).rejects.toThrow('over 1 GB');
    expect(readdirSync(path.join(env.dataFolder, 'blobs', 'incoming'))).toEqual([]);
  });

  it('what is refused at once leaves alone what is waiting', async () => {
    const { id } = await send(zip);
    await expect(send(Buffer.from('%PDF-1.7'))).rejects.toThrow();
    expect(waiting()).toContain(id);
  });

  it('one with a record of more than 8 MB', async () => {
    const record = { name: 'record.json', bytes: Buffer.alloc(8_000_001, 32) };
    await expect(send(buildZip([record]))).rejects.toThrow('no more than 8');
  });

  it('a twenty-first one', async () => {
    const person = await makePerson();
    const row = { personId: person.id, name: '', number: '', madeAt: '', logId: '', size: 1, root: '', outcome: 'unchanged', bytes: 1 };
    for (let index = 0; index < 20; index += 1) {
      await importedRecords.insert({ ...row, id: randomUUID(), fileSha256: String(index), importedAt: '', removedAt: null });
    }
    await expect(send(zip, person)).rejects.toThrow('20 records');
  }); // prettier-ignore
});

describe('a picture out of an import', () => {
  it.each([
    ['that says it is a picture and is a page', Buffer.from('<script>alert(1)</script>')],
    ['that begins as a picture and is none', Buffer.from('\xff\xd8\xff<html>', 'latin1')],
    ['that is a drawing', Buffer.from('<svg xmlns="http://www.w3.org/2000/svg" onload="alert(1)"/>')],
  ])('%s is not shown', async (_, bytes) => {
    const person = await makePerson();
    const record = buildRecord();
    record.machine.append({
      kind: 'addendum',
      sealedAt: '2026-05-01T08:00:00.000Z',
      refersTo: record.service,
      parts: {
        attachments: [{ sha256: sha256Hex(bytes), bytes: bytes.length, mediaType: 'image/jpeg', role: 'part', receivedAt: '', caption: '' }],
        body: { text: 'Look at this' },
      },
    });
    const listed = { ...listedReceipt, sha256: sha256Hex(bytes), bytes: bytes.length, name: 'bad.jpg' };
    const bundle = unsignedBundle(record);
    const text = signedText({ ...bundle, files: [...bundle.files, listed] });
    const id = await kept(buildZip([{ name: 'record.json', bytes: Buffer.from(text) }, ...givenFiles, { name: 'bad.jpg', bytes }]), person);
    await expect(readImportedPicture({ person, id, sha256: listed.sha256, kind: 'plate' })).rejects.toMatchObject({ code: 'not-found' });
    await expect(readImportedPicture({ person, id, sha256: '0'.repeat(64), kind: 'plate' })).rejects.toMatchObject({ code: 'not-found' });
  }); // prettier-ignore
});

it('what nobody decided about is swept after a day, and when its sender sends another', async () => {
  const [first, second] = [await makePerson(), await makePerson()];
  const { id } = await send(zip, first);
  await send(zip, second);
  expect(waiting()).toContain(id);
  const yesterday = new Date(Date.now() - 25 * 60 * 60 * 1000);
  utimesSync(path.join(env.dataFolder, 'imports', 'incoming', id), yesterday, yesterday);
  await send(zip, second);
  expect(waiting()).not.toContain(id);
  mkdirSync(path.join(env.dataFolder, 'imports', 'incoming', 'not-an-id'), { recursive: true });
  await send(zip, second);
});
