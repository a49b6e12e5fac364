import { chromium, type Browser, type Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { write } from '@/db/index';
import { updatePerson } from '@/db/queries/people';
import { hashPassword } from '@/lib/auth/password';
import { paths } from '@/lib/paths';
import { buildProofWorld } from '@/tests/setup/proof-world';
import { useServer } from '@/tests/setup/server';
import { useTestDatabase } from '@/tests/setup/test-database';

useTestDatabase();
const server = useServer();
const password = 'paint-the-bolt-17';
let world: Awaited<ReturnType<typeof buildProofWorld>>;
let browser: Browser;
let rider: Page;
let reader: Page;
let address: string;

beforeAll(async () => {
  world = await buildProofWorld();
  const passwordHash = await hashPassword(password);
  await write((transaction) => updatePerson(world.person.id, { passwordHash }, { transaction }));
  browser = await chromium.launch({ executablePath: '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu'] });
  rider = await (await browser.newContext()).newPage();
  reader = await (await browser.newContext({ viewport: { width: 390, height: 844 } })).newPage();
});
afterAll(() => browser.close());

describe('a rider who shares the record', () => {
  it('makes a viewing link and sees its address once, with a code to scan', async () => {
    await rider.goto(`${server.url}${paths.signIn}?next=${encodeURIComponent(paths.proof(world.machine))}`);
    await rider.getByLabel('E-mail address').fill(world.person.email);
    await rider.getByLabel('Password').first().fill(password);
    await rider.getByRole('button', { name: 'Sign in' }).click();
    await rider.waitForURL(server.url + paths.proof(world.machine));
    await rider.getByLabel('For whom').fill('Brandywell Powersports');
    await rider.getByRole('button', { name: 'Make a viewing link' }).click();
    await rider.getByRole('img', { name: /^QR code/ }).waitFor();
    address = await rider.locator('main bdi', { hasText: '/v/' }).innerText();
    expect(address).toMatch(new RegExp(`^${server.url}/v/[A-Za-z0-9_-]{22}$`));
    await rider.reload();
    expect(await rider.locator('main').innerText()).not.toContain('/v/');
  });

  it('lets a reader without an account read it on a phone, gaps first, without the secret in the address', async () => {
    await reader.goto(address);
    expect(reader.url()).toMatch(new RegExp(`^${server.url}/view/[0-9a-f-]{36}$`));
    const text = await reader.locator('main').innerText();
    expect(text).toContain('AAACRVSR3NA000417');
    expect(text.search(/\bgaps?\b/i)).toBeLessThan(text.indexOf('Every entry, newest first'));
    expect(await reader.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(390);
    const [download] = await Promise.all([
      reader.waitForEvent('download'),
      reader.getByRole('link', { name: 'Download record.json' }).click(),
    ]);
    expect(download.suggestedFilename()).toBe('record.json');
  });

  it('shows an entry with its pictures', async () => {
    const entry = `${reader.url()}/entries/${world.seq}`;
    await reader.goto(entry);
    const images = reader.locator('main img');
    const widths = await images.evaluateAll(async (all) => {
      const pictures = all as HTMLImageElement[];
      for (const one of pictures) one.loading = 'eager';
      await Promise.all(pictures.map((one) => one.decode().catch(() => undefined)));
      return pictures.map((one) => one.naturalWidth);
    });
    expect(widths.length).toBeGreaterThan(0);
    expect(Math.min(...widths)).toBeGreaterThan(0);
  });

  it('revokes the link, and the reader is told what to do', async () => {
    await rider.getByRole('button', { name: 'Revoke the viewing link “Brandywell Powersports”' }).click();
    await rider.getByRole('dialog').getByRole('button', { name: 'Revoke' }).click();
    await rider.getByText(/^Revoked \d/).waitFor();
    const answer = await reader.reload();
    expect(answer?.status()).toBe(410);
    expect(await reader.locator('main').innerText()).toContain('Ask them for a new one');
  });
});
