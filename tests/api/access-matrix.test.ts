import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import { actionBody, actionId } from '@/tests/setup/server-actions';
import { cookieOf, readerCookieOf, useServer } from '@/tests/setup/server';
import { useTestDatabase } from '@/tests/setup/test-database';
import { actions, kinds, pages, routes, type Kind, type Reach } from './access-list';
import { buildAccessWorld, type AccessWorld } from './access-world';

useTestDatabase();
const server = useServer();
let world: AccessWorld;
beforeAll(async () => {
  world = await buildAccessWorld();
});

const app = path.resolve(import.meta.dirname, '../../app');
const sources = readdirSync(app, { recursive: true, encoding: 'utf8' }).filter((file) => /\.tsx?$/.test(file));
const text = (file: string) => readFileSync(path.join(app, file), 'utf8');
const named = (source: string, pattern: RegExp) => [...source.matchAll(pattern)].map((match) => match[1] ?? '');

const builtPages = sources.filter((file) => path.basename(file) === 'page.tsx');
const builtRoutes = sources
  .filter((file) => path.basename(file) === 'route.ts')
  .flatMap((file) => {
    const methods = named(text(file), /export (?:const|(?:async )?function) (GET|HEAD|POST|PUT|PATCH|DELETE)\b/g);
    return methods.map((method) => `${method} ${file}`);
  });
const builtActions = sources
  .filter((file) => /^['"]use server['"]/.test(text(file)))
  .flatMap((file) => named(text(file), /export (?:const|async function) (\w+)/g).map((name) => `${file} ${name}`));

/** The address of a file under app/: without groups in round brackets and without the file's own name. */
function addressOf(file: string): string {
  const steps = path.dirname(file).split('/');
  const address = steps.filter((step) => step !== '.' && !step.startsWith('(')).join('/');
  if (address.includes('[')) throw new Error(`${file} has brackets in its address: give it an "at" in access-list.ts.`);
  return `/${address}`;
}

type Verdict = 'reached' | 'asked to sign in' | 'hidden' | 'told that they may not' | string;

/** What an answer means. Pages that were already being streamed say it in their text instead of in the status. */
function verdictOf(answer: { status: number; headers: Headers; body: string }): Verdict {
  const { status, headers, body } = answer;
  const away = headers.get('location') ?? headers.get('x-action-redirect') ?? '';
  if (status === 401) return 'asked to sign in';
  if (/^(https?:\/\/[^/]+)?\/sign-in\b(?!.*after=)/.test(away)) return 'asked to sign in';
  if (/NEXT_REDIRECT;\w+;\/sign-in\b(?!.*after=)/.test(body)) return 'asked to sign in';
  if (status === 404 || body.includes('NEXT_HTTP_ERROR_FALLBACK;404')) return 'hidden';
  // In a route's problem JSON, or in what an action returns.
  if (body.includes('"code":"forbidden"')) return 'told that they may not';
  if (status === 403 || status >= 500) return `${status} ${body.slice(0, 300)}`;
  return 'reached';
}

type Asked = Pick<Reach, 'who' | 'told' | 'isHiddenFromStrangers'>;

function expectedOf({ who, told = [], isHiddenFromStrangers }: Asked, kind: Kind): Verdict {
  if (who.includes(kind)) return 'reached';
  if (told.includes(kind)) return 'told that they may not';
  return kind === 'anonymous' && isHiddenFromStrangers !== true ? 'asked to sign in' : 'hidden';
}

/** A session of its own for each question: some of what is asked ends sessions. Every browser came by the addresses. */
const cookieFor = async (kind: Kind) => {
  const reader = await readerCookieOf({ links: [world.link], invitations: [world.invitation] });
  return kind === 'anonymous' ? reader : `${await cookieOf(world.people[kind])}; ${reader}`;
};

async function ask(kind: Kind, address: string, init: RequestInit = {}): Promise<Verdict> {
  const answer = await fetch(server.url + address, {
    redirect: 'manual',
    ...init,
    headers: { cookie: await cookieFor(kind), origin: server.url, ...init.headers },
  });
  return verdictOf({ status: answer.status, headers: answer.headers, body: await answer.text() });
}

/** One line for each kind of person; the whole is compared, so that a failure shows it all. */
async function everybody(reach: Asked, asked: (kind: Kind) => Promise<Verdict>) {
  const found: Record<string, Verdict> = {};
  for (const kind of kinds) found[kind] = await asked(kind);
  const expected = Object.fromEntries(kinds.map((kind) => [kind, expectedOf(reach, kind)]));
  expect(found).toEqual(expected);
}

describe('the list of who may reach what', () => {
  test('names every page there is, and no other', () => {
    expect(Object.keys(pages).sort()).toEqual(builtPages.sort());
  });
  test('names every method of every route there is, and no other', () => {
    expect(Object.keys(routes).sort()).toEqual(builtRoutes.sort());
  });
  test('names every server action there is, and no other', () => {
    expect(Object.keys(actions).sort()).toEqual(builtActions.sort());
  });
  test('finds something to name in each of the three ways', () => {
    expect(builtPages.length).toBeGreaterThan(10);
    expect(builtRoutes.length).toBeGreaterThan(5);
    expect(builtActions.length).toBeGreaterThan(8);
  });
  test('server actions stand in files that begin with "use server", never inside a page', () => {
    const inside = sources.filter((file) => /^\s+['"]use server['"]/m.test(text(file)));
    expect(inside).toEqual([]);
  });
});

describe('pages', () => {
  for (const [file, reach] of Object.entries(pages)) {
    const { who, at } = reach;
    test(`${file} is reached by ${who.join(', ')}`, async () => {
      await everybody(reach, (kind) => ask(kind, at?.(world) ?? addressOf(file)));
    });
  }
});

describe('routes', () => {
  for (const [name, reach] of Object.entries(routes)) {
    const { who, at, json, isCrossSite } = reach;
    const [method = '', file = ''] = [name.slice(0, name.indexOf(' ')), name.slice(name.indexOf(' ') + 1)];
    const init = (): RequestInit =>
      json === undefined
        ? { method }
        : { method, body: JSON.stringify(json(world)), headers: { 'content-type': 'application/json' } };

    test(`${name} is reached by ${who.join(', ')}`, async () => {
      await everybody(reach, (kind) => ask(kind, at?.(world) ?? addressOf(file), init()));
    });

    if (method === 'GET' || method === 'HEAD' || isCrossSite) continue;
    test(`${name} refuses what a page of another site sends`, async () => {
      const { headers, ...rest } = init();
      const foreign = { ...headers, cookie: await cookieFor('owner'), origin: 'https://elsewhere.example' };
      const answer = await fetch(server.url + (at?.(world) ?? addressOf(file)), { ...rest, headers: foreign });
      expect(answer.status).toBe(403);
      expect(await answer.json()).toMatchObject({ code: 'cross-site' });
    });
  }
});

describe('server actions', () => {
  for (const [name, reach] of Object.entries(actions)) {
    const { who, on, form } = reach;
    test(`${name} is reached by ${who.join(', ')}`, async () => {
      const [file = '', exported = ''] = name.split(' ');
      // A server under development knows an action only once its page was asked for.
      await ask('steward', on(world));
      await ask('owner', on(world));
      const id = actionId(`app/${file}`, exported);
      expect(id, 'the build does not know this action: no page uses it').toBeDefined();
      await everybody(reach, (kind) =>
        ask(kind, on(world), {
          method: 'POST',
          headers: { 'next-action': id ?? '' },
          body: actionBody(form?.(world) ?? {}),
        }),
      );
    });
  }
});
