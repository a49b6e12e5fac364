import { execFileSync, spawnSync } from 'node:child_process';
import { mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { machines } from '@/db/models/machines';
import { people } from '@/db/models/people';
import { readStoredLogs } from '@/db/queries/entries';
import { findLogOf } from '@/db/queries/logs';
import { findPacket } from '@/db/queries/packets';
import { forSaleScope } from '@/lib/domain/scope';
import { openDisclosure } from '@/lib/evidence/disclosure';
import type { Bundle, PricesPart } from '@/lib/evidence/format';
import { buildPacket, packetFile } from '@/lib/services/build-packet';
import { queuePacket } from '@/lib/services/request-packet';
import { useDemo } from '../setup/demo';

// What is told by a packet that is to tell no name, no VIN and no price, asked with other people's tools: poppler for
// the words and the attached files, qpdf for every object unpacked, exiftool for metadata, the independent verifier.
useDemo();

let folder = '';
let file = '';
let bundle: Bundle;
let recordJson = '';
let secrets: string[] = [];

beforeAll(async () => {
  folder = mkdtempSync(path.join(os.tmpdir(), 'witnessmark-sale-'));
  const [machine] = await machines.all({ vin: 'AAACRVSR3NA000417' });
  const everybody = await people.all();
  const owner = everybody.find(({ name }) => name === 'Imke Vandersloot');
  if (machine === undefined || owner === undefined) throw new Error('The demo has no Sorrel.');
  const queued = await queuePacket({
    machineId: machine.id,
    by: owner.id,
    purpose: 'For a buyer',
    scope: forSaleScope,
  });
  await buildPacket(queued);
  expect((await findPacket(queued.id))?.state).toBe('ready');
  file = path.join(folder, `${queued.number}.pdf`);
  writeFileSync(file, readFileSync(packetFile(queued.number)));
  mkdirSync(path.join(folder, 'attached'));
  execFileSync('pdfdetach', ['-saveall', '-o', path.join(folder, 'attached'), file]);
  recordJson = readFileSync(path.join(folder, 'attached', 'record.json'), 'utf8');
  bundle = JSON.parse(recordJson) as Bundle;
  secrets = await secretsOf(machine.id, everybody.map(({ name }) => name)); // prettier-ignore
}, 600_000);
afterAll(() => rmSync(folder, { recursive: true, force: true }));

/** Full names and surnames of everybody here, first names too, every number of the machine, and every price sealed. */
async function secretsOf(machineId: string, names: string[]): Promise<string[]> {
  const log = await findLogOf(machineId);
  const [stored] = await readStoredLogs([log?.id ?? '']);
  const shelves = await readStoredLogs(bundle.logs.filter(({ subject }) => subject === 'shelf').map(({ id }) => id));
  const values = (part: string, of: typeof shelves) =>
    of.flatMap(({ parts }) =>
      parts.filter(({ name }) => name === part).map(({ disclosure }) => openDisclosure(disclosure).value),
    );
  const numbers = values('identity', [stored!]).flatMap((value) => Object.values(value as Record<string, string>));
  const prices = values('prices', shelves).flatMap((value) => {
    const { total, lines } = value as unknown as PricesPart;
    return [total, ...lines.map(({ price }) => price)].filter((one) => one !== undefined && one.length > 2);
  }) as string[];
  expect(numbers.length).toBeGreaterThan(0);
  expect(prices.length).toBeGreaterThan(10);
  // As a person would write them; a bare 7194 is also found in hashes and coordinates, and 360 is an amount as well.
  const written = prices.map((price) => `${price.slice(0, -2)}.${price.slice(-2)}`);
  const people = names.filter((name) => name !== 'Steward').flatMap((name) => [name, ...name.split(' ')]);
  return [
    ...new Set([
      ...people,
      ...numbers,
      ...written.map((price) => `$${price}`),
      ...prices.filter((price) => price.length > 3).map((price) => `"${price}"`),
    ]),
  ];
}

function expectNoSecret(text: string): void {
  expect(secrets.filter((secret) => text.includes(secret))).toEqual([]);
}

describe('a packet for sale', () => {
  it('opens every entry and still tells what was done', () => {
    const words = execFileSync('pdftotext', ['-layout', file, '-'], { encoding: 'utf8' });
    expect(words).toContain('Engine oil');
    expect(words).toContain('VIN withheld');
    expect(words).toContain('Owner withheld');
    const first = execFileSync('pdftotext', ['-layout', '-l', '1', file, '-'], { encoding: 'utf8' });
    expect(first).toMatch(/(\d+) of \1\b/);
    expect(first).toMatch(/\d+ parts withheld/);
  });

  it('says no name, no number of the machine and no price in its words, titles and metadata', () => {
    expectNoSecret(execFileSync('pdftotext', ['-layout', file, '-'], { encoding: 'utf8' }));
    expectNoSecret(execFileSync('exiftool', ['-a', '-G1', '-s', file], { encoding: 'utf8' }));
    expectNoSecret(path.basename(file));
  });

  it('says none in any object of the file, unpacked', () => {
    const unpacked = path.join(folder, 'unpacked.pdf');
    spawnSync('qpdf', ['--qdf', '--object-streams=disable', file, unpacked]);
    const bytes = readFileSync(unpacked, 'latin1');
    // Bookmarks and names of files are UTF-16 in hexadecimal.
    const strings = [...bytes.matchAll(/<feff([0-9a-f]+)>/gi)].map(([, hex]) =>
      Buffer.from(hex ?? '', 'hex')
        .swap16()
        .toString('utf16le'),
    );
    expect(strings.join('\n')).toContain('How to check this packet');
    expectNoSecret(strings.join('\n'));
    expectNoSecret(bytes);
  });

  it('says none in record.json, with every disclosure opened, nor in the attached files', () => {
    expectNoSecret(recordJson);
    const opened = bundle.logs
      .flatMap(({ entries }) =>
        entries.flatMap(({ parts, leaf }) => [leaf, ...parts.map((one) => openDisclosure(one))]),
      )
      .map((one) => JSON.stringify(one));
    expect(opened.join('\n')).toContain('Engine oil');
    const names = bundle.logs
      .flatMap(({ entries }) => entries.flatMap(({ parts }) => parts))
      .map((one) => openDisclosure(one).name);
    expect(names.filter((name) => ['author', 'contact', 'identity', 'prices'].includes(name))).toEqual([]);
    expectNoSecret(opened.join('\n'));
    const attached = readdirSync(path.join(folder, 'attached'));
    expect(attached.length).toBeGreaterThan(5);
    expectNoSecret(attached.join('\n'));
    expect(attached.filter((name) => /receipt|work-order|document/.test(name))).toEqual([]);
    expectNoSecret(execFileSync('exiftool', ['-a', '-s', path.join(folder, 'attached')], { encoding: 'utf8' }));
  });

  it('is unchanged to the project’s command and to the independent verifier', () => {
    const record = path.join(folder, 'attached', 'record.json');
    const own = spawnSync('node', ['scripts/verify.mjs', record, '--json'], { encoding: 'utf8' });
    const other = spawnSync('python3', ['tests/outside/independent_verifier.py', record], { encoding: 'utf8' });
    expect({ own: own.status, other: other.status, said: other.stdout.slice(0, 400) }).toMatchObject({
      own: 0,
      other: 0,
    });
    expect(spawnSync('node', ['scripts/verify.mjs', file]).status).toBe(0);
  });
});
