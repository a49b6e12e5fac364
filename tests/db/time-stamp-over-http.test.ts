import { createServer, type IncomingMessage, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';
import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { httpAuthority } from '@/lib/ports/time-stamp-authority/http';
import { answerRequest } from '@/lib/ports/time-stamp-authority/own';
import { buildRequest } from '@/lib/ports/time-stamp-authority/request';
import { makePerson, useTestDatabase } from '../setup/test-database';

useTestDatabase();

type Answer = (request: IncomingMessage, body: Buffer, response: ServerResponse) => void;
const reply = { 'content-type': 'application/timestamp-reply' };
const asAsked: Answer = (_, body, response) => response.writeHead(200, reply).end(answerRequest(body));
let answer: Answer = asAsked;
const server = createServer((request, response) => {
  const pieces: Buffer[] = [];
  request.on('data', (piece: Buffer) => pieces.push(piece));
  request.on('end', () => answer(request, Buffer.concat(pieces), response));
});
let host = '';
beforeAll(async () => {
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  host = `127.0.0.1:${(server.address() as AddressInfo).port}`;
});
afterAll(() => new Promise((resolve) => server.close(resolve)));

const request = buildRequest({ digest: new Uint8Array(32), nonce: 1n });
const stamp = () => httpAuthority(`http://${host}/tsa`).stamp(request);

describe('an authority reached over HTTP', () => {
  it('is asked by POST with the media type of RFC 3161 §3.4 and gives its reply back', async () => {
    let seen: IncomingMessage | undefined;
    answer = (incoming, body, response) => {
      seen = incoming;
      asAsked(incoming, body, response);
    };
    expect((await stamp()).length).toBeGreaterThan(1000);
    expect(seen).toMatchObject({ method: 'POST', url: '/tsa' });
    expect(seen?.headers).toMatchObject({
      'content-type': 'application/timestamp-query',
      accept: 'application/timestamp-reply',
    });
  });

  it('gets the user name and password that its address holds, and they stay out of its name', async () => {
    let authorization: string | undefined;
    answer = (incoming, body, response) => {
      authorization = incoming.headers.authorization;
      asAsked(incoming, body, response);
    };
    const authority = httpAuthority(`http://steward:p%40ss@${host}/tsa`);
    await authority.stamp(request);
    expect(authorization).toBe(`Basic ${Buffer.from('steward:p@ss').toString('base64')}`);
    expect(authority.name).toBe(`http://${host}/tsa`);
  });

  it.each<[string, Answer, RegExp]>([
    ['another status', (_, __, response) => response.writeHead(503, reply).end(), /answered with status 503/],
    [
      'another media type',
      (_, __, response) => response.writeHead(200, { 'content-type': 'text/html' }).end('hi'),
      /answered with text\/html/,
    ],
    [
      'a redirect',
      (_, __, response) => response.writeHead(302, { location: 'http://127.0.0.1:1/' }).end(),
      /fetch failed/,
    ],
    [
      'more than any token',
      (_, __, response) => response.writeHead(200, reply).end(Buffer.alloc(200_001)),
      /more than 200000 bytes/,
    ],
  ])('is not believed when it answers with %s', async (_, given, message) => {
    answer = given;
    await expect(stamp()).rejects.toThrow(message);
  });

  it('stamps every seal when the steward names it, and its stamps are not the installation’s own', async () => {
    answer = asAsked;
    vi.stubEnv('WITNESSMARK_TIME_STAMP_URLS', `http://${host}/one  http://${host}/two`);
    vi.resetModules();
    const { openLog } = await import('@/lib/services/open-log');
    const { stampingSettled } = await import('@/lib/services/stamp-checkpoints');
    const { tokens } = await import('@/db/models/logs');
    const { id } = await makePerson();
    const { log } = await openLog({
      subject: 'shelf',
      subjectId: randomUUID(),
      by: id,
      parts: async () => ({ body: { name: 'Imke’s shelf' } }),
    });
    await stampingSettled();
    const rows = await tokens.all({ logId: log }, { order: [['authority', 'ASC']] });
    expect(rows.map(({ authority, isOwnAuthority }) => [authority, isOwnAuthority])).toEqual([
      [`http://${host}/one`, false],
      [`http://${host}/two`, false],
    ]);
    vi.unstubAllEnvs();
  });
});
