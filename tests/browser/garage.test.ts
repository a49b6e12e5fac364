import sharp from 'sharp';
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { draftChanges, uploads } from '@/db/models/drafts';
import { foldChanges } from '@/lib/domain/field-changes';
import { createMachine } from '@/lib/services/create-machine';
import { machineInput } from '@/lib/services/machine-input';
import { cookieOf, useServer } from '@/tests/setup/server';
import { makePerson, useTestDatabase } from '@/tests/setup/test-database';

useTestDatabase();
const server = useServer();
let browser: Browser;
let machine: string;
let cookie: { name: string; value: string };

beforeAll(async () => {
  const owner = await makePerson({ name: 'Imke Vandersloot' });
  const input = machineInput.parse({
    make: 'Corvane', model: 'Sorrel 1800', modelYear: '2022', kind: 'big V-twin tourer', vin: 'AAACRVSR3NA000417',
    machine: crypto.randomUUID(), why: 'new', firstUseOn: '2022-05-01', firstUseOdometer: '3', startsOn: '2022-05-01', startsOdometer: '3', timeZone: 'America/Denver', distanceUnit: '[mi_i]',
  }); // prettier-ignore
  machine = (await createMachine({ person: owner, input })).machine;
  const [name = '', value = ''] = (await cookieOf(owner)).split(/=(.*)/s);
  cookie = { name, value };
  browser = await chromium.launch({ executablePath: '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu'] });
});
afterAll(() => browser.close());

async function phone(): Promise<BrowserContext> {
  const context = await browser.newContext({ viewport: { width: 390, height: 844 }, hasTouch: true });
  await context.addCookies([{ ...cookie, url: server.url }]);
  return context;
}

function picture(background: string): Promise<Buffer> {
  return sharp({ create: { width: 320, height: 240, channels: 3, background } })
    .jpeg()
    .toBuffer();
}

/** A new worksheet on the machine, with its odometer screen open. */
async function beginWorksheet(page: Page): Promise<string> {
  await page.goto(`${server.url}/garage#new-worksheet/${machine}`);
  // Other tests leave theirs open.
  const another = page.getByRole('button', { name: 'Begin another' });
  const tasks = page.getByRole('heading', { name: 'Choose tasks', level: 1 });
  await another.or(tasks).waitFor();
  if (await another.isVisible()) await another.click();
  await page.getByRole('heading', { name: 'Choose tasks', level: 1 }).waitFor();
  const id = /#worksheet\/([0-9a-f-]+)/.exec(page.url())?.[1] ?? '';
  await page.getByRole('navigation', { name: 'Screens' }).getByRole('link', { name: 'Odometer and times' }).click();
  await page.getByLabel('Odometer', { exact: true }).waitFor();
  return id;
}

const odometer = (page: Page) => page.getByLabel('Odometer', { exact: true });
async function onServer(id: string): Promise<Record<string, string>> {
  return foldChanges(await draftChanges.all({ draftId: id }));
}

describe('the garage', () => {
  it('is sent without anything of a person in it', async () => {
    const { text } = await server.request.get('/garage').expect(200);
    expect(text).not.toContain('Imke');
    expect(text).not.toContain('Sorrel');
  });

  it('keeps what was typed when the page is closed without signal at once, and sends it later', async () => {
    const context = await phone();
    const page = await context.newPage();
    const id = await beginWorksheet(page);
    await page.waitForFunction(() => navigator.serviceWorker.controller !== null);
    await page.waitForFunction(async () => (await caches.match('/garage')) !== undefined);
    await context.setOffline(true);
    await odometer(page).fill('15002');
    await page.close();

    // Opened again with no signal: the page comes from the worker, the figure from the phone.
    const again = await context.newPage();
    await again.goto(`${server.url}/garage#worksheet/${id}/start`);
    await expect.poll(() => odometer(again).inputValue()).toBe('15002');
    await again.getByRole('status').filter({ hasText: 'Waiting for signal' }).waitFor();
    expect((await onServer(id))['odometer/value']).toBeUndefined();

    await context.setOffline(false);
    await again.getByRole('status').filter({ hasText: 'Saved on the server' }).waitFor();
    expect((await onServer(id))['odometer/value']).toBe('15002');
    await context.close();
  });

  it('shows what works without signal in place of a page that needs the server', async () => {
    const context = await phone();
    const page = await context.newPage();
    await beginWorksheet(page);
    await page.waitForFunction(() => navigator.serviceWorker.controller !== null);
    await page.waitForFunction(async () => (await caches.match('/garage')) !== undefined);
    await context.setOffline(true);
    await page.goto(`${server.url}/machines/${machine}`);
    await page.getByRole('heading', { name: 'No signal here' }).waitFor();
    await context.close();
  });

  it('merges what two phones entered on one worksheet', async () => {
    const [one, two] = [await phone(), await phone()];
    const first = await one.newPage();
    const id = await beginWorksheet(first);
    await odometer(first).fill('15002');
    await first.getByRole('status').filter({ hasText: 'Saved on the server' }).waitFor();
    const second = await two.newPage();
    await second.goto(`${server.url}/garage#worksheet/${id}/start`);
    await expect.poll(() => odometer(second).inputValue()).toBe('15002');
    await second.getByLabel('Notes').fill('Cold start, no leaks');
    await second.getByRole('status').filter({ hasText: 'Saved on the server' }).waitFor();
    await expect.poll(async () => (await onServer(id)).notes).toBe('Cold start, no leaks');
    expect((await onServer(id))['odometer/value']).toBe('15002');
    await one.close();
    await two.close();
  });

  it('sends the good photos and refuses the others by name', async () => {
    const context = await phone();
    const page = await context.newPage();
    const id = await beginWorksheet(page);
    await page.getByRole('navigation', { name: 'Screens' }).getByRole('link', { name: 'Photos' }).click();
    await page.getByLabel('Choose files').setInputFiles([
      { name: 'odometer.jpg', mimeType: 'image/jpeg', buffer: await picture('#223344') },
      { name: 'empty.jpg', mimeType: 'image/jpeg', buffer: Buffer.alloc(0) },
      { name: 'notes.jpg', mimeType: 'image/jpeg', buffer: Buffer.from('no picture, only words') },
      {
        name: 'drawing.svg',
        mimeType: 'image/svg+xml',
        buffer: Buffer.from('<svg xmlns="http://www.w3.org/2000/svg"/>'),
      },
      { name: '../../magnet 🧲.jpg', mimeType: 'image/jpeg', buffer: await picture('#445566') },
    ]);
    const photos = page.getByRole('region', { name: 'Photos' });
    await photos.getByText('empty.jpg is empty. Choose another file.').waitFor();
    await photos.getByText('drawing.svg is not a JPEG, PNG, WebP or HEIC picture.').waitFor();
    await photos.getByText('notes.jpg is not a JPEG, PNG, WebP or HEIC picture').waitFor();
    await expect.poll(() => photos.getByText(/^On the server, /).count()).toBe(2);
    const names = (await uploads.all({ draftId: id })).map(({ name }) => name);
    expect(names).toHaveLength(2);
    expect(names.filter((name) => name.includes('/') || name.startsWith('.'))).toEqual([]);
    await context.close();
  });

  it('seals a receipt on the shelf, and its line is a lot in the next worksheet', async () => {
    const context = await phone();
    const page = await context.newPage();
    await page.goto(`${server.url}/garage#new-receipt`);
    await page.getByRole('heading', { name: 'What did you buy?' }).waitFor();
    await page.getByRole('button', { name: 'Confirm and seal on the shelf' }).click();
    await page.getByText('3 fields need another look.').waitFor();
    await page
      .getByLabel('Choose files')
      .setInputFiles([{ name: 'receipt.jpg', mimeType: 'image/jpeg', buffer: await picture('#eeeeee') }]);
    await page.getByLabel('Date', { exact: true }).fill('2026-01-10');
    await page.locator('label', { hasText: /^Fluid$/ }).click();
    await page.getByLabel('Product, as the receipt has it').fill('Fernhill V-Twin 20W-50');
    await page.getByLabel('Grade').fill('SAE 20W-50');
    await page.getByLabel('How many bottles or cans').fill('5');
    await page.getByLabel('Each holds').fill('0,946');
    await page.locator('label', { hasText: /^L$/ }).click();
    await page.getByText(/^On the server, /).waitFor();
    await page.getByRole('button', { name: 'Confirm and seal on the shelf' }).click();
    await page.getByRole('heading', { name: 'Sealed on the shelf as entry 1' }).waitFor();

    await beginWorksheet(page);
    const screens = page.getByRole('navigation', { name: 'Screens' });
    await screens.getByRole('link', { name: 'Tasks' }).click();
    await page.getByRole('checkbox', { name: 'Engine oil and filter' }).click();
    await screens.getByRole('link', { name: 'Engine oil and filter' }).click();
    await page.getByLabel('First fill').fill('4,5');
    await page.getByRole('button', { name: 'Take 4.5 US qt from lot 1, Fernhill V-Twin 20W-50' }).click();
    await page.getByText('Covered: 4.5 US qt from lots.').waitFor();
    await context.close();
  });
});
