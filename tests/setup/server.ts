import { spawn, type ChildProcess } from 'node:child_process';
import { existsSync } from 'node:fs';
import { createServer } from 'node:net';
import path from 'node:path';
import { sealData } from 'iron-session';
import supertest from 'supertest';
import { afterAll, beforeAll } from 'vitest';
import { write } from '@/db/index';
import { insertSession, type PersonRow } from '@/db/queries/people';
import { sessionCookieOptions } from '@/lib/auth/cookies';
import { readerCookieOptions, type ReaderCookie } from '@/lib/auth/reader-cookie';
import { sessionEnd } from '@/lib/auth/session-life';
import { env } from '@/lib/env';

const root = path.resolve(import.meta.dirname, '../..');
export const buildFolder = path.join(root, process.env.WITNESSMARK_BUILD ?? '.next');
/** For work on one test: compiles each page when it is first asked for, instead of asking for a build. */
export const isDevServer = process.env.WITNESSMARK_TEST_SERVER === 'dev';
const longestStartMilliseconds = isDevServer ? 120_000 : 30_000;

export interface TestServer {
  /** `http://127.0.0.1:port`, or by the name asked for */
  url: string;
  request: ReturnType<typeof supertest>;
  /** All the server has written so far. */
  output(): string;
}

/**
 * One real `next start` on the loopback for this test file, on the file's own data folder (tests/setup/data-folder.ts).
 * `npm test` builds beforehand. Call it once at the top of the file; what it returns is filled in before the tests.
 *
 * @example
 * useTestDatabase();
 * const server = useServer();
 * it('is healthy', () => server.request.get('/api/health').expect(200));
 */
export function useServer(
  environment: Record<string, string> = {},
  // Keys of one's own are made for names: browsers offer them on localhost, and at no number.
  { hostName = '127.0.0.1' }: { hostName?: '127.0.0.1' | 'localhost' } = {},
): TestServer {
  const server = {} as TestServer;
  let child: ChildProcess | undefined;

  beforeAll(async () => {
    if (!isDevServer && !existsSync(path.join(buildFolder, 'BUILD_ID'))) {
      throw new Error(`There is no build in ${buildFolder}. Run \`npm run build\`, or all tests with \`npm test\`.`);
    }
    const port = await freePort();
    server.url = `http://${hostName}:${port}`;
    server.request = supertest(server.url);
    let output = '';
    server.output = () => output;
    const next = path.join(root, 'node_modules', 'next', 'dist', 'bin', 'next');
    const mode = isDevServer ? 'dev' : 'start';
    child = spawn(process.execPath, [next, mode, '-H', '127.0.0.1', '-p', String(port)], {
      cwd: root,
      stdio: ['ignore', 'pipe', 'pipe'],
      env: {
        ...process.env,
        NODE_ENV: isDevServer ? 'development' : 'production',
        NEXT_TELEMETRY_DISABLED: '1',
        WITNESSMARK_DATA: env.dataFolder,
        WITNESSMARK_URL: server.url,
        ...environment,
      },
    });
    for (const stream of [child.stdout, child.stderr])
      stream?.on('data', (data: Buffer) => (output += data.toString()));
    await untilAnswering(server, child);
  }, longestStartMilliseconds + 30_000);

  afterAll(async () => {
    if (child === undefined || child.exitCode !== null) return;
    const ended = new Promise((resolve) => child?.once('exit', resolve));
    child.kill('SIGTERM');
    await ended;
  });

  return server;
}

/** The Cookie header of somebody who has just signed in. */
export async function cookieOf(person: PersonRow): Promise<string> {
  const start = new Date();
  const at = start.toISOString();
  const id = crypto.randomUUID();
  const row = { id, personId: person.id, createdAt: at, lastSeenAt: at, endedAt: null, device: 'Computer' };
  await write((transaction) => insertSession({ ...row, expiresAt: sessionEnd(start).toISOString() }, { transaction }));
  const { cookieName, password, ttl } = sessionCookieOptions();
  return `${cookieName}=${await sealData({ id }, { password, ttl: ttl ?? 0 })}`;
}

/** The Cookie header of a browser that came by the addresses of these viewing links and invitations. */
export async function readerCookieOf(came: ReaderCookie): Promise<string> {
  const { cookieName, password, ttl } = readerCookieOptions();
  return `${cookieName}=${await sealData(came, { password, ttl: ttl ?? 0 })}`;
}

async function untilAnswering(server: TestServer, child: ChildProcess): Promise<void> {
  const end = Date.now() + longestStartMilliseconds;
  while (Date.now() < end) {
    if (child.exitCode !== null) throw new Error(`The server ended at once:\n${server.output()}`);
    const isUp = await fetch(`${server.url}/sign-in`).then(
      ({ status }) => status === 200,
      () => false,
    );
    if (isUp) return;
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
  throw new Error(`The server does not answer:\n${server.output()}`);
}

function freePort(): Promise<number> {
  return new Promise((resolve, reject) => {
    const probe = createServer();
    probe.once('error', reject);
    probe.listen(0, '127.0.0.1', () => {
      const address = probe.address();
      probe.close(() => resolve(typeof address === 'object' && address !== null ? address.port : 0));
    });
  });
}
