import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { readContainer } from '@/lib/evidence/container';
import { paths } from '@/lib/paths';
import { publishedKeys } from '@/lib/services/log-keys';
import { stampingSettled } from '@/lib/services/stamp-checkpoints';
import { buildProofWorld } from '@/tests/setup/proof-world';
import { cookieOf, useServer } from '@/tests/setup/server';
import { makePerson, useTestDatabase } from '@/tests/setup/test-database';
import type { PersonRow } from '@/db/queries/people';

useTestDatabase();
const server = useServer();
let browser: Browser;
let folder: string;
let world: Awaited<ReturnType<typeof buildProofWorld>>;
let page: Page;
let zip: string;

async function pageOf(person: PersonRow): Promise<{ context: BrowserContext; page: Page }> {
  const context = await browser.newContext({ viewport: { width: 390, height: 844 } });
  const [name = '', value = ''] = (await cookieOf(person)).split(/=(.*)/s);
  // The first time a page is asked for under development, it is compiled.
  context.setDefaultTimeout(90_000);
  await context.addCookies([{ name, value, url: server.url }]);
  return { context, page: await context.newPage() };
}

beforeAll(async () => {
  folder = mkdtempSync(path.join(os.tmpdir(), 'witnessmark-import-'));
  world = await buildProofWorld();
  await stampingSettled();
  browser = await chromium.launch({ executablePath: '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu'] });
  page = (await pageOf(await makePerson({ name: 'A buyer' }))).page;
});
afterAll(async () => {
  await browser.close();
  rmSync(folder, { recursive: true });
});

async function bringIn(file: string): Promise<void> {
  await page.goto(server.url + paths.imports);
  await page.locator('input[aria-label="Export (ZIP)"]').setInputFiles(file);
  await page.locator('[data-outcome]').waitFor();
}
const isWithin = () =>
  page.evaluate(() => document.documentElement.scrollWidth <= document.documentElement.clientWidth);

describe('on a phone', () => {
  it('an owner downloads the export that its button says the size of', async () => {
    const { context, page: own } = await pageOf(world.person);
    await own.goto(server.url + paths.proof(world.machine));
    await own.getByRole('link', { name: 'Export the whole record' }).click();
    const button = own.getByRole('link', { name: /^Download/ }).first();
    const words = await button.innerText();
    const [download] = await Promise.all([own.waitForEvent('download'), button.click()]);
    zip = path.join(folder, download.suggestedFilename());
    await download.saveAs(zip);
    expect(download.suggestedFilename()).toMatch(/^witnessmark-WX-\w{4}-\w{4}-\d{4}-\d\d-\d\d\.zip$/);
    const bytes = readFileSync(zip).length;
    expect(words).toContain(`${(bytes / 1e6).toFixed(1)} MB`);
    expect((await readContainer(readFileSync(zip))).kind).toBe('export');
    await context.close();
  });

  it('somebody brings it in, sees what was found, checks it with a key, and keeps it', async () => {
    await bringIn(zip);
    const found = page.locator('[data-outcome="unchanged"]');
    expect(await found.innerText()).toContain('Anybody could have made this file');
    expect(await isWithin()).toBe(true);
    await page.getByLabel('Key, or its fingerprint').fill('half a key');
    await page.getByRole('button', { name: 'Check with this key' }).click();
    await page.locator('p', { hasText: 'Copy it whole' }).first().waitFor();
    await page.getByLabel('Key, or its fingerprint').fill(publishedKeys()[0]!.fingerprint);
    await page.getByRole('button', { name: 'Check with this key' }).click();
    await page.getByText('the key you gave', { exact: true }).waitFor();
    await page.getByRole('button', { name: 'Keep it, read-only' }).click();
    await page.getByText('Read-only: this record is kept elsewhere').waitFor();
    const text = await page.locator('main').innerText();
    expect(text).toContain('2022 Corvane Sorrel 1800');
    expect(text).toContain('10,238 mi');
    expect(await isWithin()).toBe(true);
  });

  it('its pictures are shown, and what is shown was made anew', async () => {
    const picture = page.getByRole('img', { name: /^Odometer/ });
    await picture.scrollIntoViewIfNeeded();
    await expect
      .poll(() => picture.evaluate((one: HTMLImageElement) => one.naturalWidth), { timeout: 60_000 })
      .toBeGreaterThan(0);
    const address = await picture.getAttribute('src');
    const answer = await page.request.get(server.url + address!);
    expect(answer.headers()).toMatchObject({ 'content-type': 'image/webp', 'x-content-type-options': 'nosniff' });
    const strangers = await pageOf(world.person);
    expect((await strangers.page.request.get(server.url + address!)).status()).toBe(404);
    expect((await strangers.page.goto(page.url()))?.status()).toBe(404);
    await strangers.context.close();
  });

  it('the same file a second time is pointed out', async () => {
    await bringIn(zip);
    expect(await page.locator('[data-outcome]').innerText()).toContain('You keep this very file already');
    expect(await page.getByRole('button', { name: 'Keep it, read-only' }).count()).toBe(0);
  });

  it('one that was changed is named and not kept', async () => {
    const bytes = readFileSync(zip);
    // One letter: the ZIP's own check sum no longer fits, so that it is no export at all.
    const broken = path.join(folder, 'broken.zip');
    bytes.writeUInt8(bytes[bytes.indexOf('witnessmark/bundle/1')]! ^ 1, bytes.indexOf('witnessmark/bundle/1'));
    writeFileSync(broken, bytes);
    await bringIn(broken);
    const text = await page.locator('[data-outcome="unreadable"]').innerText();
    expect(text).toContain('It is not kept here');
    expect(await page.getByRole('button', { name: 'Keep it, read-only' }).count()).toBe(0);
  });

  it('what is no ZIP is refused beside the field', async () => {
    await page.goto(server.url + paths.imports);
    const file = { name: 'packet.pdf', mimeType: 'application/pdf', buffer: Buffer.from('%PDF-1.7') };
    await page.locator('input[aria-label="Export (ZIP)"]').setInputFiles(file);
    await page.getByText('This is no ZIP file').waitFor();
  });

  it('it is removed again, and asks before', async () => {
    await page.getByRole('link', { name: '2022 Corvane Sorrel 1800' }).click();
    await page.getByRole('button', { name: /^Remove the record/ }).click();
    await page.getByRole('dialog').getByRole('button', { name: 'Remove' }).click();
    await page.getByText('No record from elsewhere is kept here.').waitFor();
  });
});
