import { execFileSync, spawnSync } from 'node:child_process';
import { createHash, randomBytes, randomUUID } from 'node:crypto';
import { createWriteStream, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { readContainer } from '@/lib/evidence/container';
import type { Attachment, Bundle } from '@/lib/evidence/format';
import { verifyBundle } from '@/lib/evidence/verify';
import { putBlob, blobStore } from '@/lib/ports/blob-store';
import { exportRecord, readExportSize } from '@/lib/services/export-record';
import { publishedKeys } from '@/lib/services/log-keys';
import { relations } from '@/db/models/people';
import { stampingSettled } from '@/lib/services/stamp-checkpoints';
import { buildProofWorld } from '../setup/proof-world';
import { sealRecord } from '../setup/sealed-record';
import { makePerson, useTestDatabase } from '../setup/test-database';

// Judged by unzip, Python's zipfile, Java's two readers where there is a Java, sha256sum, the project's own command,
// and the verifier in Python.
useTestDatabase();

let folder = '';
let world: Awaited<ReturnType<typeof buildProofWorld>>;
let file = '';
beforeAll(async () => {
  folder = mkdtempSync(path.join(os.tmpdir(), 'witnessmark-export-'));
  world = await buildProofWorld();
  await stampingSettled();
  file = await exported('export.zip');
});
afterAll(() => rmSync(folder, { recursive: true }));

async function exported(name: string, files: 'originals' | 'copies' = 'originals'): Promise<string> {
  const target = path.join(folder, name);
  const made = await exportRecord({ person: world.person, machineId: world.machine, files });
  await pipeline(Readable.from(made.body), createWriteStream(target));
  expect(readFileSync(target).length).toBe(made.bytes);
  expect(made.name).toMatch(/^witnessmark-WX-[2-9A-Z]{4}-[2-9A-Z]{4}-\d{4}-\d\d-\d\d\.zip$/);
  return target;
}
const bundleIn = (zip: string): Bundle => JSON.parse(python(zip, 'record.json').toString()) as Bundle;

/** One file of a ZIP, as Python's zipfile reads it. */
function python(zip: string, name: string): Buffer {
  const program = 'import sys, zipfile; sys.stdout.buffer.write(zipfile.ZipFile(sys.argv[1]).read(sys.argv[2]))';
  return execFileSync('python3', ['-c', program, zip, name], { maxBuffer: 1e9 });
}
function judge(zip: string, ...more: string[]): { own: number | null; independent: number | null; said: string } {
  const own = spawnSync('node', ['scripts/verify.mjs', zip, ...more], { encoding: 'utf8' });
  const other = spawnSync('python3', ['tests/outside/independent_verifier.py', zip], { encoding: 'utf8' });
  return { own: own.status, independent: other.status, said: own.stdout + own.stderr + other.stdout + other.stderr };
}

describe('an export', () => {
  it('is a sound ZIP for unzip and for Python', () => {
    expect(execFileSync('unzip', ['-t', file], { encoding: 'utf8' })).toContain('No errors detected');
    const program = 'import sys, zipfile; z = zipfile.ZipFile(sys.argv[1]); print(z.testzip()); print("\\n".join(z.namelist()))';
    const [bad, ...names] = execFileSync('python3', ['-c', program, file], { encoding: 'utf8' }).trim().split('\n');
    expect(bad).toBe('None');
    expect(names.slice(0, 2)).toEqual(['README.txt', 'record.json']);
    expect(names).toContain('verify.mjs');
    expect(names.filter((name) => name.split('/').length > 2)).toEqual([]);
  }); // prettier-ignore

  it('holds every original byte for byte, as its record lists it', () => {
    const unpacked = path.join(folder, 'unpacked');
    execFileSync('unzip', ['-q', '-d', unpacked, file]);
    const listed = bundleIn(file).files.filter(({ included }) => included);
    const sums = listed.map(({ sha256, name }) => `${sha256}  ${name}\n`).join('');
    const checked = execFileSync('sha256sum', ['--check', '--strict', '-'], { cwd: unpacked, input: sums });
    expect(checked.toString().split(': OK\n')).toHaveLength(listed.length + 1);
    const originals = listed.filter(({ name }) => name.startsWith('originals/'));
    expect(originals.map(({ sha256 }) => sha256)).toEqual(expect.arrayContaining([world.odometer, world.receiptPdf]));
    // The unpacked folder is checked as it lies there, too.
    const own = spawnSync('node', ['scripts/verify.mjs', path.join(unpacked, 'record.json'), '--files', unpacked]);
    expect([own.status, own.stderr.toString()]).toEqual([0, '']);
  });

  it('is unchanged for both verifiers, with the key from elsewhere', () => {
    const [key] = publishedKeys();
    const { own, independent, said } = judge(file, '--key', key!.verifierKey);
    expect([own, independent], said).toEqual([0, 0]);
    expect(said).toContain('verify.mjs');
    expect(said).not.toContain('Listed but not here');
  });

  it('opens everything, prices too, and keeps nothing of the machine back', async () => {
    const { bundleText, files } = await readContainer(readFileSync(file));
    const finding = verifyBundle({ bundleText, ...(files && { files }) });
    expect(finding.outcome).toBe('unchanged');
    const [machine] = finding.logs;
    expect(finding.entries.filter(({ log }) => log === machine!.id).flatMap((one) => one.withheldParts)).toEqual([]);
    const purchase = finding.entries.find(({ kind }) => kind === 'purchase');
    expect(purchase?.openedParts.map(({ name }) => name)).toContain('prices');
    expect(bundleIn(file).purpose).toBe('export');
  });

  it('explains itself, with its number, its key and its fingerprint, in lines that fit a page', () => {
    const readme = python(file, 'README.txt').toString();
    const bundle = bundleIn(file);
    expect(readme).toContain(bundle.number);
    expect(readme).toContain(bundle.verifierKeys[0]);
    expect(readme.replace(/\s+/g, ' ')).toContain(publishedKeys()[0]!.fingerprint.replace(/\s+/g, ' '));
    for (const standard of ['RFC 8785', 'FIPS 180-4', 'RFC 6962', 'RFC 8032', 'RFC 3161', 'RFC 9901', 'signed-note']) {
      expect(readme).toContain(standard);
    }
    // This record was sealed by the real clock.
    expect(readme).not.toContain('DEMO');
    const keyLine = bundle.verifierKeys[0]!.length + 2;
    expect(readme.split('\n').filter((line) => line.length > Math.max(79, keyLine))).toEqual([]);
  });

  it('is in one order, whenever it is made', async () => {
    const names = (zip: string) => bundleIn(zip).files.map(({ name }) => name);
    expect(names(await exported('again.zip'))).toEqual(names(file));
  });

  it('without originals holds the copies and the papers, and says so', async () => {
    const zip = await exported('copies.zip', 'copies');
    const { own, independent, said } = judge(zip);
    expect([own, independent], said).toEqual([0, 0]);
    const { files } = bundleIn(zip);
    expect(files.find(({ sha256 }) => sha256 === world.odometer)?.included).toBe(false);
    expect(files.find(({ sha256 }) => sha256 === world.receiptPdf)?.included).toBe(true);
    expect(python(zip, 'README.txt').toString()).toContain('without original pictures');
  });

  it('with one original changed is altered for both, and says which file', () => {
    const name = bundleIn(file).files.find(({ sha256 }) => sha256 === world.odometer)!.name;
    const forged = path.join(folder, 'forged.zip');
    const program = 'import sys, zipfile\nwith zipfile.ZipFile(sys.argv[1]) as a, zipfile.ZipFile(sys.argv[2], "w") as b:\n  for n in a.namelist(): b.writestr(n, a.read(n) + (b"!" if n == sys.argv[3] else b""))';
    execFileSync('python3', ['-c', program, file, forged, name]);
    const { own, independent, said } = judge(forged);
    expect([own, independent], said).toEqual([1, 1]);
    expect(said).toContain('file-changed');
    expect(said).toContain(name);
  }); // prettier-ignore

  it('is refused to a helper and to a stranger', async () => {
    const helper = await makePerson({ name: 'Joost' });
    const row = { id: randomUUID(), personId: helper.id, subjectKind: 'machine' as const, subjectId: world.machine };
    await relations.insert({ ...row, relation: 'helper', since: '2025-01-01T00:00:00.000Z', until: null });
    for (const person of [helper, await makePerson()]) {
      await expect(exportRecord({ person, machineId: world.machine, files: 'copies' })).rejects.toMatchObject({
        code: 'not-found',
      });
      await expect(readExportSize({ person, machineId: world.machine, files: 'copies' })).rejects.toThrow();
    }
  });
});

it('an export of a record whose pictures are gone names each of them and is still unchanged', async () => {
  const { rider, machineId } = await sealRecord();
  await stampingSettled();
  await relate(rider.id, machineId);
  const size = await readExportSize({ person: rider, machineId, files: 'originals' });
  // Two originals and one copy that were never stored.
  expect(size).toMatchObject({ missing: 3, isTooLarge: false });
  const made = await exportRecord({ person: rider, machineId, files: 'originals' });
  const zip = path.join(folder, 'missing.zip');
  await pipeline(Readable.from(made.body), createWriteStream(zip));
  const readme = python(zip, 'README.txt').toString();
  for (const hash of ['a', 'b', 'c']) expect(readme).toContain(hash.repeat(64));
  expect(bundleIn(zip).files.map(({ included }) => included)).toEqual([false, false, false]);
  expect(judge(zip)).toMatchObject({ own: 0, independent: 0 });
});

it('200 files of 1.5 MB are written without being held in memory', async () => {
  const { rider, machineId, seal, machine } = await sealRecord();
  await relate(rider.id, machineId);
  const attachments: Attachment[] = [];
  for (let index = 0; index < 200; index += 1) {
    const { sha256, bytes } = await putBlob(randomBytes(1_500_000));
    attachments.push({ sha256, bytes, mediaType: 'image/jpeg', role: 'part', receivedAt: '2026-04-18T22:50:00.000Z', caption: '' });
  }
  await seal(machine.log, 'reading', { body: { on: { date: '2026-04-19', zone: 'UTC' }, odometer: { value: '18300', unit: '[mi_i]', instrument: 0 } }, attachments });
  await stampingSettled();
  const { body, bytes } = await exportRecord({ person: rider, machineId, files: 'originals' });
  expect(bytes).toBeGreaterThan(300_000_000);
  const before = process.memoryUsage().rss;
  let [most, seen] = [0, 0];
  const hash = createHash('sha256');
  for await (const piece of body) {
    seen += piece.length;
    hash.update(piece);
    most = Math.max(most, process.memoryUsage().rss - before);
  }
  expect(seen).toBe(bytes);
  // All of it would be 300 MB.
  expect(most).toBeLessThan(100_000_000);
}, 120_000); // prettier-ignore

it('a file that changes while it is written ends the export instead of lying about it', async () => {
  const name = 'x';
  const { writeZip } = await import('@/lib/services/write-zip');
  let reading = 0;
  const source = { name, bytes: 2, open: () => [Buffer.from(reading++ === 0 ? 'ab' : 'ac')] };
  const read = async () => {
    for await (const piece of writeZip([source], new Date())) void piece;
  };
  await expect(read()).rejects.toThrow('changed while it was written');
  const short = { name, bytes: 3, open: () => [Buffer.from('ab')] };
  const pieces = writeZip([short], new Date());
  await expect(pieces.next()).rejects.toThrow('2 bytes long and was to be 3');
  expect(await blobStore.has('0'.repeat(64))).toBe(false);
  writeFileSync(path.join(folder, 'done'), '');
});

async function relate(personId: string, machineId: string): Promise<void> {
  const row = { id: randomUUID(), personId, subjectKind: 'machine' as const, subjectId: machineId };
  await relations.insert({ ...row, relation: 'owner', since: '2025-01-01T00:00:00.000Z', until: null });
}
