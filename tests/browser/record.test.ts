import { randomUUID } from 'node:crypto';
import { Readable } from 'node:stream';
import { chromium, type Browser, type Page } from 'playwright-core';
import sharp from 'sharp';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { write } from '@/db/index';
import { updatePerson } from '@/db/queries/people';
import { hashPassword } from '@/lib/auth/password';
import { paths } from '@/lib/paths';
import { confirmReceipt } from '@/lib/services/confirm-receipt';
import { receiveUpload } from '@/lib/services/receive-upload';
import { reviewWorksheet } from '@/lib/services/review-worksheet';
import { sealWorksheet } from '@/lib/services/seal-worksheet';
import { draftWith, oilChange, receiptFields, riderWithMachine, typeInto } from '@/tests/db/services/garage-story';
import { useServer } from '@/tests/setup/server';
import { useTestDatabase } from '@/tests/setup/test-database';

useTestDatabase();
const server = useServer();
const password = 'paint-the-bolt-17';
let rider: Awaited<ReturnType<typeof riderWithMachine>>;
let browser: Browser;
let page: Page;

async function photograph(draft: string, role: string): Promise<void> {
  const picture = await sharp({ create: { width: 320, height: 240, channels: 3, background: '#334155' } })
    .jpeg()
    .toBuffer();
  const id = randomUUID();
  const { person } = rider;
  await receiveUpload({ person, query: { id, draft, name: `${role}.jpg` }, body: Readable.from([picture]) });
  await typeInto({ person, draft, fields: { [`photos/${id}/role`]: role } });
}

beforeAll(async () => {
  rider = await riderWithMachine();
  const { person, machine, shelf } = rider;
  const passwordHash = await hashPassword(password);
  await write((transaction) => updatePerson(person.id, { passwordHash }, { transaction }));
  const receipt = await draftWith({ person, kind: 'receipt', subject: shelf, fields: receiptFields });
  await photograph(receipt, 'receipt-front');
  const purchase = await confirmReceipt({ person, draftId: receipt });
  const draftId = await draftWith({ person, kind: 'worksheet', subject: machine, fields: oilChange(purchase) });
  await photograph(draftId, 'odometer');
  const { composed } = await reviewWorksheet({ person, draftId });
  await sealWorksheet({ person, draftId, reviewed: composed!.fingerprint });
  browser = await chromium.launch({ executablePath: '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu'] });
  page = await (await browser.newContext({ viewport: { width: 1280, height: 860 } })).newPage();
  // Well under the test's own limit, so that a slow machine is told by what it waited for.
  page.setDefaultTimeout(90_000);
});
afterAll(() => browser.close());

/** Pictures that have arrived and could be decoded. */
const picturesShown = () =>
  page.locator('main img').evaluateAll(async (images) => {
    const all = images as HTMLImageElement[];
    for (const image of all) image.loading = 'eager';
    await Promise.all(all.map((image) => image.decode().catch(() => undefined)));
    return all.map((image) => image.naturalWidth > 0);
  });

describe('a rider with one service sealed', () => {
  it('signs in and reads on the bench what is due', async () => {
    await page.goto(server.url + paths.signIn);
    await page.getByLabel('E-mail address').fill(rider.person.email);
    await page.getByLabel('Password').first().fill(password);
    await page.getByRole('button', { name: 'Sign in' }).click();
    await page.waitForURL(server.url + paths.bench(rider.machine));
    const news = await page.getByRole('heading', { level: 1 }).textContent();
    expect(news).toMatch(/ (is|are) (due|over|not in this record)/);
    await page.getByRole('region', { name: 'What is due, by distance' }).waitFor();
    const start = page.getByRole('link', { name: 'Start a worksheet' });
    expect(await start.getAttribute('href')).toBe(paths.newWorksheet(rider.machine));
  });

  it('finds every entry in the ledger, the newest first, with its pictures', async () => {
    await page.goto(server.url + paths.record(rider.machine));
    const lines = page.getByRole('list', { name: 'Entries, newest first' }).getByRole('listitem');
    expect(await lines.count()).toBe(3);
    const newest = await lines.first().innerText();
    expect(newest).toContain('10,238 mi');
    expect(newest).toContain('4.5 US qt');
    expect(await lines.last().innerText()).toContain('Record opened');
    // The odometer and the receipt the oil came from.
    expect(await picturesShown()).toEqual([true, true]);
  });

  it('opens an entry with its boxes, plates, checks and hashes', async () => {
    await page.getByRole('list', { name: 'Entries, newest first' }).getByRole('link').first().click();
    await page.waitForURL(server.url + paths.entry(rider.machine, 2));
    const text = await page.locator('main').innerText();
    expect(text).toContain('4.25 + 0.25 US qt');
    expect(text).toContain('Odometer photographed');
    expect(text).toContain('not independent');
    expect(text).toContain('Leaf hash');
    expect(await picturesShown()).toEqual([true, true]);
  });

  it('follows a lot from the entry to its receipt and back', async () => {
    await page.getByRole('link', { name: 'Receipt 1, line 1' }).click();
    await page.waitForURL(server.url + paths.shelfEntry(rider.shelf, 1));
    const text = await page.locator('main').innerText();
    expect(text).toContain('Brandywell Powersports');
    expect(text).toContain('$89.94');
    expect(text).toContain('1.5 of 6 US qt left');
    await page.getByRole('link', { name: 'Entry 2' }).first().click();
    await page.waitForURL(server.url + paths.entry(rider.machine, 2));
  });

  it('says that there is no such entry, inside the shell', async () => {
    const answer = await page.goto(server.url + paths.entry(rider.machine, 99));
    expect(answer?.status()).toBe(404);
    await page.getByRole('heading', { name: /no such machine or entry/ }).waitFor();
    await page.getByRole('link', { name: 'Schedule' }).first().waitFor();
  });
});
