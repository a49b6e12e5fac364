import { chromium, type Browser, type Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { paths } from '@/lib/paths';
import { bundleRecord } from '@/lib/services/bundle-record';
import { publishedKeys } from '@/lib/services/log-keys';
import { buildProofWorld } from '@/tests/setup/proof-world';
import { useServer } from '@/tests/setup/server';
import { useTestDatabase } from '@/tests/setup/test-database';

useTestDatabase();
const server = useServer();
let browser: Browser;
let page: Page;
let record: string;

beforeAll(async () => {
  const { machine } = await buildProofWorld();
  record = (await bundleRecord({ machineId: machine, purpose: 'to be checked', number: 'WM-TEST-2345' })).text;
  browser = await chromium.launch({ executablePath: '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu'] });
  page = await (await browser.newContext()).newPage();
  await page.goto(server.url + paths.verify);
  await page.getByText('Ready. The file stays on this device').waitFor();
  // The cable is pulled: from here on nothing can be fetched.
  await page.context().setOffline(true);
});
afterAll(() => browser.close());

let checks = 0;
async function check(text: string): Promise<{ outcome: string | null; text: string }> {
  checks += 1;
  const name = `record-${checks}.json`;
  const file = { name, mimeType: 'application/json', buffer: Buffer.from(text) };
  await page.locator('input[aria-label="Packet or record.json"]').setInputFiles(file);
  const report = page.locator('[data-outcome]', { hasText: name });
  await report.waitFor();
  return { outcome: await report.getAttribute('data-outcome'), text: await report.innerText() };
}

describe('a reader who checks a file in the browser, without a connection', () => {
  it('is told that it is unchanged, and first of all that the key came from the file', async () => {
    const found = await check(record);
    expect(found.outcome).toBe('unchanged');
    expect(found.text).toContain('Unchanged since it was sealed');
    const keyRemark = found.text.indexOf('Anybody could have made this file');
    expect(keyRemark).toBeGreaterThan(0);
    expect(keyRemark).toBeLessThan(found.text.indexOf('Entry by entry'));
    expect(found.text).toContain('publishes this same key');
    expect(found.text).toContain('10,238 mi');
  });

  it('is told which line was altered when one figure is', async () => {
    const found = await check(record.replace('"leaf":"', '"leaf":" '));
    expect(found.outcome).toBe('altered');
    expect(found.text).toContain('Altered: this is not what was sealed');
  });

  it('is told why when the file is no record', async () => {
    const found = await check('{"format":"something else"}');
    expect(found.outcome).toBe('unreadable');
  });

  it('takes a fingerprint from paper, in groups, as the key', async () => {
    await check(record);
    await page.getByText('Add a key you trust').click();
    const groups = publishedKeys()[0]!.fingerprint;
    expect(groups).toMatch(/^([0-9a-f]{4} ){15}[0-9a-f]{4}$/);
    await page.getByLabel('Key, or its fingerprint').fill(groups);
    await page.getByRole('button', { name: 'Check again with these' }).click();
    await page.getByText('the key you gave').waitFor();
    expect(await page.locator('[data-outcome]').innerText()).not.toContain('Anybody could have made this file');
    await page.getByLabel('Key, or its fingerprint').fill('f'.repeat(64));
    await page.getByRole('button', { name: 'Check again with these' }).click();
    await page.locator('p', { hasText: 'lists no key with that fingerprint' }).first().waitFor();
    expect(await page.locator('[data-outcome]').count()).toBe(0);
  });
});
