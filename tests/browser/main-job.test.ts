import { execFileSync, spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core';
import sharp from 'sharp';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { mailNames, readKeptMail } from '@/lib/ports/mail-folder';
import { useServer } from '../setup/server';
import { useTestDatabase } from '../setup/test-database';

// The whole main job once, as a stranger does it: from signing up to a packet that two verifiers, qpdf and poppler judge.
useTestDatabase();
const server = useServer();
const password = 'hot oil, cold beer, no hurry';
const texts = {
  greek: 'Λάδι κινητήρα, ζεστό',
  cyrillic: 'Прокладка новая',
  chinese: '机油已更换',
  arabic: 'زيت المحرك',
  emoji: 'Dry 🛢️🔧',
};
const everyScript = Object.values(texts).join(' · ');

let browser: Browser;
let context: BrowserContext;
let page: Page;
let folder: string;
beforeAll(async () => {
  folder = mkdtempSync(path.join(os.tmpdir(), 'witnessmark-job-'));
  browser = await chromium.launch({ executablePath: '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu'] });
  context = await browser.newContext({ viewport: { width: 390, height: 844 }, hasTouch: true, acceptDownloads: true });
  page = await context.newPage();
  page.setDefaultTimeout(15_000);
});
afterAll(async () => {
  await browser.close();
  rmSync(folder, { recursive: true });
});

const screen = (name: string) => page.getByRole('navigation', { name: 'Screens' }).getByRole('link', { name }).click();
const photo = (background: string) =>
  sharp({
    create: { width: 1200, height: 900, channels: 3, background, noise: { type: 'gaussian', mean: 120, sigma: 30 } },
  })
    .jpeg()
    .toBuffer();

async function newestMail(to: string): Promise<string> {
  for (const name of await mailNames()) {
    const mail = await readKeptMail(name);
    if (mail?.to === to) return mail.text;
  }
  throw new Error(`No mail to ${to}.`);
}

/** Drafts, changes, files and notes in the garage's IndexedDB. */
const keptOnDevice = () =>
  page.evaluate(
    () =>
      new Promise<number>((resolve, reject) => {
        const opening = indexedDB.open('witnessmark-garage');
        opening.onerror = () => reject(opening.error);
        opening.onsuccess = () => {
          const names = [...opening.result.objectStoreNames];
          const reading = opening.result.transaction(names);
          let total = 0;
          for (const name of names) {
            const counting = reading.objectStore(name).count();
            counting.onsuccess = () => (total += counting.result);
          }
          reading.oncomplete = () => {
            opening.result.close();
            resolve(total);
          };
        };
      }),
  );

describe('the main job', () => {
  it('begins with an account, confirmed by mail', async () => {
    await page.goto(`${server.url}/sign-up`);
    await page.getByLabel('Name').fill('Imke Vandersloot');
    await page.getByLabel('E-mail address').fill('imke@garage.example');
    await page.getByLabel('Password').first().fill(password);
    await page.getByRole('button', { name: /^(Sign up|Create)/ }).click();
    await page.waitForURL(/check-mail/);
    const [address] = /http\S+confirm-email\/\S+/.exec(await newestMail('imke@garage.example')) ?? [];
    await page.goto(address ?? '');
    await page.getByRole('button', { name: /Confirm/ }).click();
    await page.getByLabel('E-mail address').fill('imke@garage.example');
    await page.getByLabel('Password').first().fill(password);
    await page.getByRole('button', { name: 'Sign in' }).click();
    await page.waitForURL(/machines\/new/);
  });

  it('sets up a machine, after a wrong VIN was named and nothing typed was lost', async () => {
    await page.getByLabel('Make').fill('Corvane');
    await page.getByLabel('Model', { exact: true }).fill('Sorrel 1800');
    await page.getByLabel('Model year').fill('2022');
    await page.getByLabel('Kind of machine').selectOption('big V-twin tourer');
    await page.getByLabel('VIN', { exact: true }).fill('AAACRVSO3NA000417');
    await page.getByLabel('First used on').fill('2024-06-14');
    await page.getByLabel('Odometer then').fill('4');
    await page.getByLabel('What the paper calls it').fill('Corvane factory warranty');
    await page.getByLabel('Starts on').fill('2024-06-14');
    await page.getByLabel('Runs for').fill('36');
    const submit = page.locator('main button[type=submit]').last();
    await submit.click();
    await page
      .getByText(/position 8/i)
      .first()
      .waitFor();
    expect(await page.getByLabel('Model', { exact: true }).inputValue()).toBe('Sorrel 1800');
    await page.getByLabel('VIN', { exact: true }).fill('AAACRVSR3NA000417');
    await submit.click();
    await page.waitForURL(/\/machines\/[0-9a-f-]{36}/);
    await page.getByRole('heading', { level: 1 }).waitFor();
  });

  it('logs a service on the phone, with figures, photos and every script, and seals it once', async () => {
    await page.getByRole('link', { name: 'Start a worksheet' }).click();
    await page.getByRole('heading', { name: 'Choose tasks', level: 1 }).waitFor();
    await page.getByRole('checkbox', { name: 'Engine oil and filter' }).click();
    await screen('Odometer and times');
    await page.getByLabel('Odometer', { exact: true }).fill('1004');
    await page.getByRole('button', { name: 'Finished now' }).click();
    await page.getByLabel('Notes').fill(everyScript);
    await screen('Engine oil and filter');
    await page.getByLabel('First fill').fill('4,25');
    await screen('Photos');
    await page.getByLabel('Choose files').setInputFiles([
      { name: 'odometer.jpg', mimeType: 'image/jpeg', buffer: await photo('#334455') },
      { name: 'left.jpg', mimeType: 'image/jpeg', buffer: await photo('#775544') },
    ]);
    await expect
      .poll(() => page.getByRole('region', { name: 'Photos' }).getByText('On the server').count(), { timeout: 30_000 })
      .toBe(2);
    await page.getByRole('status').filter({ hasText: 'Saved on the server' }).waitFor();
    await screen('Summary');
    await page
      .getByRole('link', { name: 'Review and seal' })
      .or(page.getByRole('button', { name: 'Review and seal' }))
      .click();
    await page.waitForURL(/\/review/);
    await page.getByRole('button', { name: /Seal/ }).click();
    await page.waitForURL(/\/record\/2\?sealed/);
    const entry = await page.locator('main').innerText();
    expect(entry).toContain('4.25 US qt');
    for (const text of Object.values(texts)) expect(entry).toContain(text);
  });

  it('builds a packet that both verifiers, qpdf and poppler accept', async () => {
    await page.setViewportSize({ width: 1280, height: 860 });
    await page.goto(page.url().replace(/\/record\/.*/, '/proof'), { waitUntil: 'networkidle' });
    await page.getByLabel('What it is for').fill('A claim on the gearbox');
    await page.getByRole('button', { name: 'Build a packet' }).click();
    const link = page.getByRole('link', { name: /Download/ }).first();
    await link.waitFor({ timeout: 90_000 });
    const [download] = await Promise.all([page.waitForEvent('download'), link.click()]);
    const packet = path.join(folder, 'packet.pdf');
    await download.saveAs(packet);
    expect(spawnSync('qpdf', ['--check', packet]).status).toBe(0);
    const text = execFileSync('pdftotext', [packet, '-'], { encoding: 'utf8' });
    expect(text).toContain('AAACRVSR3NA000417');
    expect(text).toContain(texts.greek);
    expect(text).toContain(texts.cyrillic);
    expect(spawnSync('node', ['scripts/verify.mjs', packet]).status).toBe(0);
    expect(spawnSync('python3', ['tests/outside/independent_verifier.py', packet]).status).toBe(0);
    const bytes = readFileSync(packet);
    const place = bytes.indexOf('record.json');
    bytes[place + 2] = (bytes[place + 2] ?? 0) ^ 1;
    writeFileSync(path.join(folder, 'bent.pdf'), bytes);
    expect([1, 2]).toContain(spawnSync('node', ['scripts/verify.mjs', path.join(folder, 'bent.pdf')]).status);
  });

  it('is read behind a viewing link by somebody without account, until it is revoked', async () => {
    await page.getByLabel('For whom').fill('Brandywell Powersports');
    await page.getByRole('button', { name: 'Make a viewing link' }).click();
    await page.getByRole('img', { name: /^QR code/ }).waitFor();
    const address = /http:\/\/\S+\/v\/[A-Za-z0-9_-]{22}/.exec(await page.locator('main').innerText())?.[0] ?? '';
    const reader = await (await browser.newContext()).newPage();
    await reader.goto(address);
    expect(await reader.locator('main').innerText()).toContain('AAACRVSR3NA000417');
    await page.getByRole('button', { name: 'Revoke the viewing link “Brandywell Powersports”' }).click();
    await page.getByRole('dialog').getByRole('button', { name: 'Revoke' }).click();
    await expect.poll(async () => (await reader.reload())?.status()).toBe(410);
    await reader.context().close();
  });

  it('ends with signing out, which leaves nothing of the rider on the device', async () => {
    await page.goto(`${server.url}/garage`);
    await page.getByText('Sorrel').first().waitFor();
    expect(await keptOnDevice()).toBeGreaterThan(0);
    await page.goto(`${server.url}/account`);
    await page.getByRole('button', { name: 'Sign out' }).click();
    await page.waitForURL(/sign-in|\/$/);
    expect(await keptOnDevice()).toBe(0);
  });
});
