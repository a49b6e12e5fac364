import { chromium, type Browser, type Request } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { sha256Hex } from '@/lib/evidence/hash';
import { paths } from '@/lib/paths';
import { bundleRecord } from '@/lib/services/bundle-record';
import { buildProofWorld } from '@/tests/setup/proof-world';
import { useServer } from '@/tests/setup/server';
import { useTestDatabase } from '@/tests/setup/test-database';
import { check, describeChecks } from './check-story';

useTestDatabase();
const server = useServer();
let browser: Browser;
let record: string;
let older: string;

beforeAll(async () => {
  const { machine } = await buildProofWorld();
  const made = await bundleRecord({ machineId: machine, purpose: 'to be checked', number: 'WM-TEST-2345' });
  record = made.text;
  older = made.bundle.logs[0]?.entries[0]?.seal.checkpoint ?? '';
  browser = await chromium.launch({ executablePath: '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu'] });
});
afterAll(() => browser.close());

describeChecks('on the served page', 'served', {
  browser: () => browser,
  address: () => server.url + paths.verify,
  record: () => record,
  older: () => older,
});

describe('a reader who checks with a connection', () => {
  it('sends no byte of the file either', async () => {
    const page = await (await browser.newContext()).newPage();
    await page.goto(server.url + paths.verify);
    await page.getByText('Ready. The file stays on this device').waitFor();
    const asked: Request[] = [];
    page.context().on('request', (request) => asked.push(request));
    await check(page, record);
    for (const request of asked) {
      expect(request.method()).toBe('GET');
      expect(request.postData()).toBeNull();
      expect(request.url()).not.toMatch(/record-\d|WM-TEST|AAACRV/);
    }
    await page.context().close();
  });
});

describe('the files handed out for a check', () => {
  it.each(['verify.html', 'verify.mjs'])('%s has the very SHA-256 that the method page shows', async (name) => {
    const answer = await fetch(`${server.url}/${name}`);
    expect(answer.headers.get('content-disposition')).toBe(`attachment; filename="${name}"`);
    const sha256 = sha256Hex(new Uint8Array(await answer.arrayBuffer()));
    const method = await (await fetch(server.url + paths.method)).text();
    const shown = method.replaceAll(/<[^>]*>/g, '');
    expect(shown).toContain(`SHA-256 of ${name}${sha256}`);
  });
});
