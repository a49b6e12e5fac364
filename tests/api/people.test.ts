import { readFile } from 'node:fs/promises';
import path from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import { sessions } from '@/db/models/people';
import { findPersonByEmail, type PersonRow } from '@/db/queries/people';
import { hashPassword } from '@/lib/auth/password';
import { mailNames, readKeptMail } from '@/lib/ports/mail-folder';
import { actionBody, actionId } from '@/tests/setup/server-actions';
import { cookieOf, isDevServer, useServer } from '@/tests/setup/server';
import { makePerson, useTestDatabase } from '@/tests/setup/test-database';

useTestDatabase();
const server = useServer();
const password = 'primary chaincase gasket';
let rider: PersonRow;

beforeAll(async () => {
  rider = await makePerson({ email: 'imke@rider.example', passwordHash: await hashPassword(password) });
});

async function act(page: string, action: string, fields: Record<string, string>, more: Record<string, string> = {}) {
  const [file = '', name = ''] = action.split(' ');
  if (isDevServer) await fetch(server.url + page);
  return fetch(server.url + page, {
    method: 'POST',
    redirect: 'manual',
    headers: { origin: server.url, 'next-action': actionId(`app/${file}`, name) ?? 'unknown', ...more },
    body: actionBody(fields),
  });
}
const signIn = (fields: Record<string, string>, more?: Record<string, string>) =>
  act('/sign-in', '(public)/sign-in/actions.ts signInAction', fields, more);
const goesTo = (answer: Response) => (answer.headers.get('x-action-redirect') ?? '').split(';')[0];
const sessionCookie = (answer: Response) =>
  answer.headers.getSetCookie().find((cookie) => cookie.startsWith('witnessmark-session=')) ?? '';

describe('signing in over the network', () => {
  test('sets a cookie scripts cannot read and other sites’ requests do not carry', async () => {
    const answer = await signIn({ email: 'imke@rider.example', password });
    expect(goesTo(answer)).toBe('/start');
    const attributes = sessionCookie(answer).split('; ').slice(1);
    expect(attributes).toEqual(expect.arrayContaining(['HttpOnly', 'SameSite=lax', 'Path=/']));
    expect(attributes.some((attribute) => attribute.startsWith('Domain'))).toBe(false);
  });

  test('an e-mail address is the same in capitals and with spaces around it', async () => {
    expect(goesTo(await signIn({ email: '  IMKE@Rider.Example ', password }))).toBe('/start');
  });

  test('leads to a page of ours that asked for it, and never to another site', async () => {
    expect(goesTo(await signIn({ email: 'imke@rider.example', password, next: '/account' }))).toBe('/account');
    for (const next of ['//elsewhere.example', 'https://elsewhere.example/', '/\\elsewhere.example', '/api/garage']) {
      expect(goesTo(await signIn({ email: 'imke@rider.example', password, next })), next).toBe('/start');
    }
  });

  test('answers a wrong password and an unknown address with the same words and never with the password', async () => {
    const [wrong, unknown] = await Promise.all(
      ['imke@rider.example', 'nobody@rider.example'].map(async (email) => {
        const answer = await signIn({ email, password: 'not the right one' });
        const body = await answer.text();
        expect(body).not.toContain('not the right one');
        return /"fields":\{[^}]*\}/.exec(body)?.[0];
      }),
    );
    expect(wrong).toContain('does not fit this e-mail address');
    expect(unknown).toBe(wrong);
  });

  test('is refused to a page of another site', async () => {
    const answer = await signIn({ email: 'imke@rider.example', password }, { origin: 'https://elsewhere.example' });
    expect(answer.status).toBeGreaterThanOrEqual(400);
    expect(sessionCookie(answer)).toBe('');
  });

  test('a session that was signed out stays dead although its cookie is sent again', async () => {
    const cookie = sessionCookie(await signIn({ email: 'imke@rider.example', password })).split(';')[0] ?? '';
    await server.request.get('/account').set('cookie', cookie).expect(200);
    const answer = await act('/sign-in', '(public)/sign-in/actions.ts signOutAction', {}, { cookie });
    expect(goesTo(answer)).toBe('/sign-in?after=signed-out');
    const after = await server.request.get('/account').set('cookie', cookie);
    expect([after.status, after.headers.location]).toEqual([307, '/sign-in?next=%2Faccount']);
  });

  test('a cookie that was not sealed by this installation is worth nothing', async () => {
    const [session] = await sessions.all({ personId: rider.id });
    for (const cookie of [`witnessmark-session=${session?.id}`, 'witnessmark-session=Fe26.2*1*a*b*c*d*e*f']) {
      await server.request.get('/account').set('cookie', cookie).expect(307);
    }
  });
});

test('signing up answers a known and an unknown address alike, and mails each once', async () => {
  const signUp = (email: string) =>
    act('/sign-up', '(public)/sign-up/actions.ts signUpAction', {
      name: 'Imke',
      email,
      password: 'clutch inspection cover',
      units: 'us',
      timeZone: 'America/Denver',
    });
  const known = await signUp('imke@rider.example');
  const unknown = await signUp('new@rider.example');
  expect([known.status, goesTo(known)]).toEqual([unknown.status, '/check-mail?for=sign-up']);
  expect(goesTo(unknown)).toBe(goesTo(known));
  // What the page after it streams carries a nonce and timings; the answer itself is status, headers and cookies.
  const headers = (answer: Response) =>
    [...answer.headers].filter(([name]) => !['date', 'link', 'content-security-policy'].includes(name));
  expect(headers(known)).toEqual(headers(unknown));
  const to = await Promise.all((await mailNames()).map(async (name) => (await readKeptMail(name))?.to));
  expect(to.sort()).toEqual(['imke@rider.example', 'new@rider.example']);
  expect(await findPersonByEmail('new@rider.example')).toMatchObject({ emailConfirmedAt: null, passwordHash: '' });
});

describe('every page', () => {
  test.each(['/', '/sign-in', '/account', '/reset-password/no-such-token', '/no-such-page'])(
    '%s is sent with a policy that holds scripts to a nonce of its own',
    async (page) => {
      const cookie = await cookieOf(rider);
      const nonces = await Promise.all(
        [1, 2].map(async () => {
          const answer = await fetch(server.url + page, { headers: { cookie }, redirect: 'manual' });
          const policy = answer.headers.get('content-security-policy') ?? '';
          const nonce = /'nonce-([\w+/=]+)'/.exec(policy)?.[1] ?? '';
          const html = await answer.text();
          for (const [tag] of html.matchAll(/<script\b[^>]*>/g)) expect(tag).toContain(`nonce="${nonce}"`);
          expect(html.match(/<script\b/g)?.length).toBeGreaterThan(0);
          expect(policy).toContain("object-src 'none'");
          expect(policy).toContain("frame-ancestors 'none'");
          expect(answer.headers.get('cache-control')).toContain('no-store');
          expect(answer.headers.get('x-content-type-options')).toBe('nosniff');
          expect(answer.headers.get('permissions-policy')).toContain('microphone=()');
          expect(answer.headers.get('x-powered-by')).toBeNull();
          return nonce;
        }),
      );
      expect(nonces[0]).toHaveLength(24);
      expect(nonces[0]).not.toBe(nonces[1]);
    },
  );

  test('a page with a secret in its address tells no other page about it', async () => {
    await server.request
      .get('/reset-password/no-such-token')
      .expect('referrer-policy', 'strict-origin')
      .expect('x-robots-tag', 'noindex');
  });

  test('the offline shell is sent with the hashes of its own scripts', async () => {
    if (isDevServer) return;
    const answer = await server.request.get('/garage').expect(200);
    const { scriptHashes } = JSON.parse(
      await readFile(path.join(process.env.WITNESSMARK_BUILD ?? '.next', 'garage-csp.json'), 'utf8'),
    ) as { scriptHashes: string[] };
    const policy = answer.headers['content-security-policy'] ?? '';
    expect(scriptHashes.length).toBeGreaterThan(0);
    for (const hash of scriptHashes) expect(policy).toContain(`'${hash}'`);
    expect(/script-src [^;]*/.exec(policy)?.[0]).not.toContain('unsafe-inline');
  });
});

test('a route says "sign in first" to a program as problem JSON (RFC 9457), and no cache keeps it', async () => {
  const answer = await server.request.get('/api/garage').expect(401);
  expect(answer.headers['content-type']).toBe('application/problem+json');
  expect(answer.headers['cache-control']).toBe('private, no-store');
  expect(answer.body).toMatchObject({ status: 401, code: 'not-signed-in' });
});
