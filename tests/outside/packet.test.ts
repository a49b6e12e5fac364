import { execFile } from 'node:child_process';
import { mkdtemp, open, readFile, readdir, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { promisify } from 'node:util';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { PacketContent } from '@/lib/packet/content';
import { drawPacket, type DrawnPacket } from '@/lib/packet/draw-packet';
import { signedDigest } from '../setup/signed-packet';
import { packetFixture, sha256, wordsInEveryScript } from './packet-fixture';

// Judges: qpdf (structure), poppler (fonts, text, attachments, pictures), mupdf (a second renderer), zbar (QR).
const run = promisify(execFile);
const tool = async (name: string, ...args: string[]) =>
  run(name, args, { maxBuffer: 64 * 1024 * 1024, encoding: 'utf8' });

let folder = '';
let file = '';
let content: PacketContent;
let drawn: DrawnPacket;
let text = '';

async function draw(to: string, from: PacketContent): Promise<DrawnPacket> {
  const handle = await open(to, 'w');
  try {
    return await drawPacket(from, handle, () => Promise.resolve());
  } finally {
    await handle.close();
  }
}

beforeAll(async () => {
  folder = await mkdtemp(path.join(tmpdir(), 'witnessmark-packet-'));
  file = path.join(folder, 'packet.pdf');
  content = await packetFixture();
  drawn = await draw(file, content);
  text = (await tool('pdftotext', '-layout', file, '-')).stdout.normalize('NFC');
}, 120_000);
afterAll(() => rm(folder, { recursive: true, force: true }));

/** Direction marks are poppler's own addition; lines may break anywhere. */
const plain = (words: string) => words.replace(/[\u200e\u200f\u202a-\u202e\u2066-\u2069]/g, '').replace(/\s+/g, ' ');

describe('a packet', () => {
  it('is a whole PDF of one revision', async () => {
    const { stdout } = await tool('qpdf', '--check', file);
    expect(stdout).toContain('No syntax or stream encoding errors found');
    const bytes = await readFile(file, 'latin1');
    expect(bytes.match(/%%EOF/g)).toHaveLength(1);
    expect(bytes.match(/startxref/g)).toHaveLength(1);
    expect(bytes.startsWith('%PDF-1.7\n%')).toBe(true);
    expect([...bytes.slice(10, 14)].every((character) => character.charCodeAt(0) > 127)).toBe(true);
    expect(drawn.bytes).toBe(bytes.length);
    expect(drawn.sha256).toBe(sha256(await readFile(file)));
  });

  it('is drawn by a second renderer without a complaint about any glyph', async () => {
    const { stderr } = await tool('mutool', 'draw', '-o', path.join(folder, 'm-%d.png'), '-r', '40', file);
    // mupdf lists the pages it draws, and says so when it was built without colour management.
    const complaints = stderr
      .split('\n')
      .filter((line) => !/^(page .*|warning: ICC support is not available|)$/.test(line));
    expect(complaints).toEqual([]);
  });

  it('embeds every font as a subset that can be read back', async () => {
    const { stdout } = await tool('pdffonts', file);
    const fonts = stdout.trim().split('\n').slice(2);
    expect(fonts.length).toBeGreaterThan(6);
    for (const font of fonts) {
      expect(font).toMatch(/^[A-Z]{6}\+/);
      expect(font).toMatch(/Identity-H\s+yes yes yes/);
    }
  });

  it.each(['greek', 'cyrillic', 'chinese', 'arabic', 'hebrew', 'emoji', 'thai'] as const)(
    'gives back the %s words of the record as text',
    (script) => {
      const wanted = wordsInEveryScript[script];
      // A line may end inside the words, so each of them is looked for by itself.
      for (const word of wanted.split(' ')) expect(plain(text)).toContain(word);
    },
  );

  it('prints a box for what no face has, and says which characters those are', () => {
    expect(drawn.missing).toEqual([...wordsInEveryScript.thai]);
    expect(plain(text)).toContain('printed as crossed boxes: U+0E44, U+0E17, U+0E22');
  });

  it('prints the fingerprint and the link so that they can be compared and copied', () => {
    expect(plain(text)).toContain(content.record.log.fingerprint);
    expect(text).toContain(content.link ?? 'no link');
  });

  it('names the gaps of the record as a whole first, on the first page', async () => {
    const { stdout } = await tool('pdftotext', '-layout', '-f', '1', '-l', '1', file, '-');
    const first = plain(stdout);
    expect(first).toContain('Record No time is proven independently');
    expect(first).toMatch(/Entry 4 is struck/);
    expect(first.indexOf('Gaps')).toBeLessThan(first.indexOf('Done in time'));
  });

  it('keeps every word of a long title', () => {
    const title = content.record.entries[4]?.title ?? '';
    expect(title.length).toBeGreaterThan(200);
    for (const word of title.split(/[ ,]+/)) expect(text).toContain(word);
  });

  it('holds record.json once, byte for byte, and every shared copy under a name that names its entry', async () => {
    const { stdout } = await tool('pdfdetach', '-list', file);
    const names = stdout
      .trim()
      .split('\n')
      .slice(1)
      .map((line) => line.replace(/^\d+: /, ''));
    expect(names.filter((name) => name === 'record.json')).toHaveLength(1);
    expect(names).toEqual([...names].sort());
    expect(names).toHaveLength(content.files.size + 1);
    expect(names).toContain([...content.files.values()][0]?.name);
    const out = path.join(folder, 'attached');
    await run('mkdir', [out]);
    await tool('pdfdetach', '-saveall', '-o', out, file);
    expect(await readFile(path.join(out, 'record.json'), 'utf8')).toBe(content.recordJson);
    for (const { name, sha256: hash } of content.files.values()) {
      expect(sha256(await readFile(path.join(out, name)))).toBe(hash);
    }
  });

  it('says of each attached file what it is: a media type, two names, a relationship, and the catalog lists it', async () => {
    const { stdout } = await tool('qpdf', '--json', '--json-key=qpdf', file);
    const objects = Object.values((JSON.parse(stdout) as { qpdf: [unknown, Record<string, unknown>] }).qpdf[1]);
    const values = objects.flatMap((object) => ((object as { value?: Record<string, unknown> }).value ?? []) as object);
    const specs = values.filter((value) => (value as Record<string, unknown>)['/Type'] === '/Filespec');
    const relationships = specs.map((spec) => (spec as Record<string, unknown>)['/AFRelationship']);
    expect(relationships.filter((one) => one === '/Data')).toHaveLength(1);
    expect(relationships.filter((one) => one === '/Supplement')).toHaveLength(content.files.size);
    for (const spec of specs) expect(Object.keys(spec)).toEqual(expect.arrayContaining(['/F', '/UF', '/EF']));
    const catalog = values.find((value) => (value as Record<string, unknown>)['/Type'] === '/Catalog');
    expect(Object.keys(catalog ?? {})).toEqual(
      expect.arrayContaining(['/AF', '/Lang', '/MarkInfo', '/Metadata', '/Names', '/OutputIntents', '/StructTreeRoot']),
    );
  });

  it('draws the very bytes that are attached', async () => {
    const out = path.join(folder, 'drawn');
    await run('mkdir', [out]);
    await tool('pdfimages', '-j', file, path.join(out, 'i'));
    const names = await readdir(out);
    const hashes = new Set(await Promise.all(names.map(async (name) => sha256(await readFile(path.join(out, name))))));
    expect(hashes).toEqual(new Set(content.files.keys()));
    const { stdout } = await tool('pdfimages', '-list', file);
    expect(stdout).not.toMatch(/cmyk/);
  });

  it('has a QR code of its viewing link that reads from a rendering of 100 dots an inch', async () => {
    // A form feed ends each page.
    const page = String(text.split('\f').findIndex((words) => words.includes('Check it yourself')) + 1);
    await tool('pdftoppm', '-r', '100', '-png', '-f', page, '-l', page, file, path.join(folder, 'qr'));
    const picture = (await readdir(folder)).find((name) => name.startsWith('qr-')) ?? '';
    const { stdout } = await tool('zbarimg', '--quiet', '--raw', path.join(folder, picture));
    expect(stdout.trim()).toBe(content.link);
  });

  it('is tagged, with headings in order, tables with heads, and words for every picture', async () => {
    const { stdout: info } = await tool('pdfinfo', file);
    expect(info).toMatch(/Tagged:\s+yes/);
    expect(info).toMatch(/Title:\s+Service record of 2022 Corvane Sorrel 1800, packet WM-7Q4K-0031/);
    const { stdout } = await tool('pdfinfo', '-struct', file);
    const tags = stdout.split('\n').map((line) => line.trim().split(/[ (:]/)[0] ?? '');
    const levels = tags.filter((tag) => /^H[1-6]$/.test(tag)).map((tag) => Number(tag.slice(1)));
    expect(levels[0]).toBe(1);
    levels.forEach((level, i) => expect(level - (levels[i - 1] ?? 0)).toBeLessThanOrEqual(1));
    expect(tags.filter((tag) => tag === 'TH').length).toBeGreaterThan(20);
    const figures = stdout.split('\n').filter((line) => /^\s*Figure/.test(line));
    expect(figures.length).toBeGreaterThan(content.files.size);
  });

  it('says on every page that the times of a demo are injected', async () => {
    for (let page = 1; page <= drawn.pages; page++) {
      const { stdout } = await tool('pdftotext', '-f', String(page), '-l', String(page), file, '-');
      expect(stdout, `page ${page}`).toContain('demo, times injected');
      expect(stdout, `page ${page}`).toContain(`Page ${page} of ${drawn.pages}`);
    }
  });

  it('draws nothing outside what both A4 and US Letter can print', async () => {
    // 30 points: the 25 that A4 is taller than Letter on either side, and a printer's own margin.
    const { stdout } = await tool('pdftotext', '-bbox', file, '-');
    const words = [...stdout.matchAll(/<word xMin="([\d.-]+)" yMin="([\d.-]+)" xMax="([\d.-]+)" yMax="([\d.-]+)"/g)];
    expect(words.length).toBeGreaterThan(1000);
    for (const [, left, top, right, bottom] of words) {
      expect(Number(left)).toBeGreaterThan(40);
      expect(Number(right)).toBeLessThan(595.28 - 40);
      expect(Number(top)).toBeGreaterThan(20);
      expect(Number(bottom)).toBeLessThan(841.89 - 30);
    }
  });

  it('sends the reader to the right page for a gap', async () => {
    const page = /Entry 3\s+Sealed 19 days after the work\.\s+page (\d+)/.exec(text)?.[1] ?? '';
    const { stdout } = await tool('pdftotext', '-f', page, '-l', page, file, '-');
    expect(stdout).toMatch(/Entry 3, service, sealed/);
  });

  it('claims PDF/A-3b in its metadata and holds neither script, encryption nor transparency', async () => {
    const bytes = await readFile(file, 'latin1');
    expect(bytes).toContain('<pdfaid:part>3</pdfaid:part><pdfaid:conformance>B</pdfaid:conformance>');
    const { stdout } = await tool('qpdf', '--qdf', '--object-streams=disable', file, '-');
    expect(stdout).not.toMatch(/\/(JavaScript|JS|Encrypt|Launch|OCProperties|SMask|ca|CA|BM) /);
    expect(stdout).toMatch(/\/ID \[/);
  });

  it('comes out the same from the same record, byte for byte but for the signature', async () => {
    const again = path.join(folder, 'again.pdf');
    await draw(again, content);
    expect(signedDigest(await readFile(again))).toEqual(signedDigest(await readFile(file)));
  });
});

describe('a record nobody would wish for', () => {
  it('is still drawn: names without end, words without spaces, controls, lone surrogates, no terms, no pictures', async () => {
    const long = `${'Gearbox'.repeat(400)} \u202e\u0007\ud800 ${'x '.repeat(4000)}`;
    const { record } = content;
    const entries = record.entries.map((entry) => ({ ...entry, title: long, notes: long }) as typeof entry);
    const odd = path.join(folder, 'odd.pdf');
    const result = await draw(odd, {
      ...content, owner: long, purpose: long, link: null, files: new Map(),
      record: { ...record, identity: null, terms: null, termsBySeq: new Map(), entries, shelves: [] },
    }); // prettier-ignore
    expect(result.pages).toBeGreaterThan(10);
    await tool('qpdf', '--check', odd);
    const { stdout } = await tool('pdftotext', '-bbox', odd, '-');
    const rights = [...stdout.matchAll(/xMax="([\d.-]+)"/g)].map(([, right]) => Number(right));
    expect(Math.max(...rights)).toBeLessThan(595.28 - 30);
  });
});
