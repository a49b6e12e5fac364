import { randomUUID } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import type { PersonRow } from '@/db/models/people';
import { shelvesOf } from '@/db/queries/shelves';
import { mostChangesAtOnce } from '@/lib/services/append-draft-changes';
import { createShelf } from '@/lib/services/create-shelf';
import { receiptFields } from '../db/services/garage-story';
import { cookieOf, useServer } from '../setup/server';
import { makePerson, useTestDatabase } from '../setup/test-database';

useTestDatabase();
const server = useServer();

interface Rider {
  person: PersonRow;
  shelf: string;
  send: (method: 'get' | 'post' | 'patch' | 'delete', path: string, body?: object) => Promise<Answer>;
}
interface Answer {
  status: number;
  type: string;
  body: Record<string, unknown>;
}

async function rider(): Promise<Rider> {
  const person = await makePerson();
  await createShelf({ person });
  const [shelf] = await shelvesOf(person.id);
  const cookie = await cookieOf(person);
  return {
    person,
    shelf: shelf!.id,
    send: async (method, path, body) => {
      const request = server.request[method](path).set('Cookie', cookie).set('Origin', server.url);
      const response = await (body === undefined ? request : request.send(body));
      return { status: response.status, type: response.type, body: response.body as Record<string, unknown> };
    },
  };
}

const changesFrom = (fields: Record<string, string>) =>
  Object.entries(fields).map(([field, value]) => ({
    id: randomUUID(),
    field,
    value,
    deviceAt: '2026-04-18T10:00:00.000Z',
  }));

describe('the drafts API', () => {
  it('takes a receipt from its first change to the shelf, and every step twice', async () => {
    const { send, shelf } = await rider();
    const draft = { id: randomUUID(), kind: 'receipt', subject: shelf };
    expect((await send('post', '/api/drafts', draft)).status).toBe(201);
    const again = await send('post', '/api/drafts', draft);
    expect(again).toMatchObject({ status: 200, body: { draft: { id: draft.id, subject: shelf, state: 'open' } } });

    const changes = changesFrom(receiptFields);
    const first = await send('post', `/api/drafts/${draft.id}`, { changes });
    expect(first).toMatchObject({ status: 200, body: { refused: [], changes: [] } });
    const second = await send('post', `/api/drafts/${draft.id}`, { changes });
    expect(new Set(second.body.accepted as string[])).toEqual(new Set(changes.map(({ id }) => id)));
    expect((await send('get', `/api/drafts/${draft.id}`)).body.changes).toHaveLength(changes.length);

    const sealed = await send('post', `/api/drafts/${draft.id}/confirm-receipt`, {});
    expect(sealed).toMatchObject({ status: 200, body: { seq: 1 } });
    expect((await send('post', `/api/drafts/${draft.id}/confirm-receipt`, {})).body).toEqual(sealed.body);
    expect((await send('get', '/api/garage')).body).toMatchObject({
      shelves: [{ id: shelf, lots: [{ balance: { amount: '6', unit: '[qt_us]' } }, { kind: 'part' }] }],
      drafts: [],
    });
    const late = await send('post', `/api/drafts/${draft.id}`, { changes: changesFrom({ total: '1' }) });
    expect(late).toMatchObject({
      status: 409,
      type: 'application/problem+json',
      body: { code: 'already-sealed', title: 'This receipt is already sealed as entry 1 of the shelf.' },
    });
  });

  it('answers a receipt that cannot be confirmed with every field', async () => {
    const { send, shelf } = await rider();
    const id = randomUUID();
    await send('post', '/api/drafts', { id, kind: 'receipt', subject: shelf });
    const answer = await send('post', `/api/drafts/${id}/confirm-receipt`, {});
    expect(answer).toMatchObject({
      status: 422,
      type: 'application/problem+json',
      body: { fields: { lines: expect.any(String), 'boughtOn/date': expect.any(String) } },
    });
  });

  it.each([
    ['no JSON', 'null', 422],
    [
      'too many changes',
      JSON.stringify({
        changes: changesFrom(
          Object.fromEntries(Array.from({ length: mostChangesAtOnce + 1 }, (_, i) => [`a${i}`, 'x'])),
        ),
      }),
      422,
    ],
    ['more than it can take at once', JSON.stringify({ changes: 'x'.repeat(4_000_001) }), 413],
  ])('refuses %s', async (_, text, status) => {
    const { person, send, shelf } = await rider();
    const id = randomUUID();
    await send('post', '/api/drafts', { id, kind: 'receipt', subject: shelf });
    await server.request
      .post(`/api/drafts/${id}`)
      .set('Cookie', await cookieOf(person))
      .set('Origin', server.url)
      .set('Content-Type', 'application/json')
      .send(text)
      .expect(status);
  });

  it('keeps one rider from another rider’s draft', async () => {
    const [owner, stranger] = [await rider(), await rider()];
    const id = randomUUID();
    await owner.send('post', '/api/drafts', { id, kind: 'receipt', subject: owner.shelf });
    const answers = [
      await stranger.send('get', `/api/drafts/${id}`),
      await stranger.send('post', `/api/drafts/${id}`, { changes: [] }),
      await stranger.send('delete', `/api/drafts/${id}`),
      await stranger.send('patch', `/api/drafts/${id}`, { subject: stranger.shelf }),
      await stranger.send('post', `/api/drafts/${id}/confirm-receipt`, {}),
      await stranger.send('post', '/api/drafts', { id: randomUUID(), kind: 'receipt', subject: owner.shelf }),
    ];
    expect(answers.map(({ status }) => status)).toEqual([404, 404, 404, 404, 404, 404]);
    expect((await owner.send('delete', `/api/drafts/${id}`)).status).toBe(204);
  });

  it('takes nothing that another site sends', async () => {
    const { person, shelf } = await rider();
    await server.request
      .post('/api/drafts')
      .set('Cookie', await cookieOf(person))
      .set('Origin', 'https://elsewhere.example')
      .send({ id: randomUUID(), kind: 'receipt', subject: shelf })
      .expect(403);
  });
});
