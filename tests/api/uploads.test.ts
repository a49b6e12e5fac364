import { execFileSync } from 'node:child_process';
import { createHash, randomUUID } from 'node:crypto';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { crc32, deflateSync } from 'node:zlib';
import sharp from 'sharp';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { blobStore } from '@/lib/ports/blob-store';
import { paths } from '@/lib/paths';
import { draftWith, riderWithMachine } from '@/tests/db/services/garage-story';
import { cookieOf, useServer } from '../setup/server';
import { useTestDatabase } from '../setup/test-database';

useTestDatabase();
const server = useServer();

let folder = '';
let cookie = '';
let machine = '';
let draft = '';
let photo: Buffer;
beforeAll(async () => {
  folder = mkdtempSync(path.join(os.tmpdir(), 'witnessmark-uploads-'));
  const rider = await riderWithMachine();
  machine = rider.machine;
  cookie = await cookieOf(rider.person);
  draft = await draftWith({ person: rider.person, kind: 'worksheet', subject: machine, fields: {} });
  // Noise does not compress: 12 megapixels at this quality come to over 10 MB, which a proxy would have cut.
  const create = { width: 4000, height: 3000, channels: 3, background: '#777' } as const;
  photo = await sharp({ create: { ...create, noise: { type: 'gaussian', mean: 128, sigma: 60 } } })
    .jpeg({ quality: 96 })
    .toBuffer();
});
afterAll(() => rmSync(folder, { recursive: true }));

function send(body: Buffer, name: string, more: { id?: string; sha256?: string; draft?: string } = {}) {
  const query = {
    id: more.id ?? randomUUID(),
    draft: more.draft ?? draft,
    name,
    ...(more.sha256 ? { sha256: more.sha256 } : {}),
  };
  return server.request
    .post(paths.api.uploads)
    .query(query)
    .set({ cookie, origin: server.url, 'content-type': 'application/octet-stream' })
    .send(body);
}
const hash = (bytes: Buffer) => createHash('sha256').update(bytes).digest('hex');

describe('an upload', () => {
  it('keeps a photo of over 10 MB byte for byte, however often it is sent', async () => {
    expect(photo.length).toBeGreaterThan(10_500_000);
    const id = randomUUID();
    const first = await send(photo, 'odometer.jpg', { id, sha256: hash(photo) }).expect(201);
    expect(first.body).toMatchObject({
      id,
      sha256: hash(photo),
      bytes: photo.length,
      mediaType: 'image/jpeg',
      width: 4000,
    });
    expect((await blobStore.read(hash(photo))).equals(photo)).toBe(true);
    const again = await send(photo, 'odometer.jpg', { id }).expect(200);
    expect(again.body).toEqual(first.body);
    const original = await server.request
      .get(paths.api.file(hash(photo), 'original', machine))
      .set({ cookie })
      .expect(200);
    expect(original.headers['content-disposition']).toMatch(/^attachment/);
    expect(hash(original.body as Buffer)).toBe(hash(photo));
    const thumb = await server.request
      .get(paths.api.file(hash(photo), 'thumb', machine))
      .set({ cookie })
      .expect(200);
    expect(thumb.headers['content-type']).toBe('image/webp');
  });

  it('takes a HEIC that libheif made, keeps it, and makes a copy any browser shows', async () => {
    const [png, heic] = [path.join(folder, 'p.png'), path.join(folder, 'p.heic')];
    writeFileSync(png, await sharp(photo).resize(640).png().toBuffer());
    execFileSync('heif-enc', ['-o', heic, png], { stdio: 'ignore' });
    const bytes = readFileSync(heic);
    const { body } = await send(bytes, 'IMG.HEIC').expect(201);
    expect(body).toMatchObject({ sha256: hash(bytes), mediaType: 'image/heic', width: 640 });
    expect((await sharp(await blobStore.read(body.copySha256 as string)).metadata()).format).toBe('jpeg');
  });

  const sound = () =>
    sharp({ create: { width: 40, height: 30, channels: 3, background: '#456' } })
      .jpeg()
      .toBuffer();
  it.each([
    ['nothing at all', 'empty.jpg', async () => Buffer.alloc(0), /^empty\.jpg is empty/],
    [
      'words named as a picture',
      'notes.jpg',
      async () => Buffer.from('only words, no picture'),
      /^notes\.jpg is not a JPEG/,
    ],
    [
      'an SVG',
      'drawing.svg',
      async () => Buffer.from('<svg xmlns="http://www.w3.org/2000/svg"/>'),
      /^drawing\.svg is not a JPEG/,
    ],
    [
      'a picture of 256 megapixels',
      'bomb.png',
      async () => blankPng(16_000, 16_000),
      /^bomb\.png has more than 50 megapixels/,
    ],
    ['half a picture', 'half.jpg', async () => photo.subarray(0, photo.length / 2), /^half\.jpg cannot be opened/],
  ])('refuses %s by name, and the next file goes on', async (_what, name, make, sentence) => {
    const refused = await send(await make(), name);
    expect(refused.headers['content-type']).toBe('application/problem+json');
    expect([409, 415]).toContain(refused.status);
    expect(refused.body.title).toMatch(sentence);
    await send(await sound(), 'good.jpg').expect(201);
  });

  it('takes only the last part of a name that tries to climb', async () => {
    const { body } = await send(await sound(), '../../etc/pass\u0000wd.jpg').expect(201);
    expect(body.name).toBe('passwd.jpg');
  });

  it('refuses bytes that are not those the browser hashed, and a body over the limit', async () => {
    const whole = await sound();
    const { body } = await send(whole, 'cut.jpg', { sha256: hash(Buffer.from('other')) }).expect(409);
    expect(body.title).toBe('cut.jpg did not arrive whole. Send it again.');
    await send(Buffer.alloc(40_000_001), 'huge.jpg').expect(413);
  });

  it('goes to nobody else’s worksheet', async () => {
    const other = await riderWithMachine();
    const theirs = await draftWith({ person: other.person, kind: 'worksheet', subject: other.machine, fields: {} });
    await send(await sound(), 'mine.jpg', { draft: theirs }).expect(404);
  });
});

/** A one-bit grey PNG (PNG specification, 3rd edition, section 11.2.1), small however large it claims to be. */
function blankPng(width: number, height: number): Buffer {
  const header = Buffer.alloc(13);
  header.writeUInt32BE(width, 0);
  header.writeUInt32BE(height, 4);
  header[8] = 1;
  const chunk = (type: string, data: Buffer) => {
    const body = Buffer.concat([Buffer.from(type, 'latin1'), data]);
    const [length, sum] = [Buffer.alloc(4), Buffer.alloc(4)];
    length.writeUInt32BE(data.length);
    sum.writeUInt32BE(crc32(body));
    return Buffer.concat([length, body, sum]);
  };
  const pixels = deflateSync(Buffer.alloc((Math.ceil(width / 8) + 1) * height));
  const signature = Buffer.from('\x89PNG\r\n\x1a\n', 'latin1');
  return Buffer.concat([signature, chunk('IHDR', header), chunk('IDAT', pixels), chunk('IEND', Buffer.alloc(0))]);
}
