import { randomUUID } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { Readable } from 'node:stream';
import { chromium, type Browser, type Page } from 'playwright-core';
import sharp from 'sharp';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { write } from '@/db/index';
import { updatePerson } from '@/db/queries/people';
import { hashPassword } from '@/lib/auth/password';
import { forSaleScope } from '@/lib/domain/scope';
import { paths } from '@/lib/paths';
import { blobStore } from '@/lib/ports/blob-store';
import { confirmReceipt } from '@/lib/services/confirm-receipt';
import { createViewingLink } from '@/lib/services/create-viewing-link';
import { readShelf } from '@/lib/services/read-record';
import { receiveUpload } from '@/lib/services/receive-upload';
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

beforeAll(async () => {
  rider = await riderWithMachine();
  const { person, machine, shelf } = rider;
  const passwordHash = await hashPassword(password);
  await write((transaction) => updatePerson(person.id, { passwordHash }, { transaction }));
  const receipt = await draftWith({ person, kind: 'receipt', subject: shelf, fields: receiptFields });
  const paper = await sharp({ create: { width: 600, height: 1200, channels: 3, background: '#f2efe6' } }).jpeg().toBuffer(); // prettier-ignore
  const id = randomUUID();
  await receiveUpload({ person, query: { id, draft: receipt, name: 'receipt.jpg' }, body: Readable.from([paper]) });
  await typeInto({ person, draft: receipt, fields: { [`photos/${id}/role`]: 'receipt-front' } });
  const purchase = await confirmReceipt({ person, draftId: receipt });
  const draftId = await draftWith({ person, kind: 'worksheet', subject: machine, fields: oilChange(purchase) });
  await sealWorksheet({ person, draftId });
  browser = await chromium.launch({ executablePath: '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu'] });
  const context = await browser.newContext({ viewport: { width: 390, height: 844 }, hasTouch: true, bypassCSP: true });
  page = await context.newPage();
  page.setDefaultTimeout(90_000);
  await page.goto(server.url + paths.signIn);
  await page.getByLabel('E-mail address').fill(person.email);
  await page.getByLabel('Password').first().fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await page.waitForURL(server.url + paths.bench(machine));
});
afterAll(() => browser.close());

const area = () => page.getByTestId('draw-area');
const boxes = () => page.getByRole('region', { name: 'Boxes' }).getByRole('listitem');

let scrolledWhileDrawing = Number.NaN;
/** A finger drawn over the picture, in fractions of it, as the browser itself hands touches on. */
async function drawByFinger(from: [number, number], to: [number, number]): Promise<void> {
  // Before the picture is there, its area has another height.
  await area()
    .locator('img')
    .evaluate((image: HTMLImageElement) => image.decode());
  await area().scrollIntoViewIfNeeded();
  const { x, y, width, height } = (await area().boundingBox())!;
  const at = ([fx, fy]: [number, number]) => ({ x: x + fx * width, y: y + fy * height });
  const before = await page.evaluate(() => window.scrollY);
  const session = await page.context().newCDPSession(page);
  const send = (type: 'touchStart' | 'touchMove' | 'touchEnd', points: { x: number; y: number }[]) =>
    session.send('Input.dispatchTouchEvent', { type, touchPoints: points });
  await send('touchStart', [at(from)]);
  for (let step = 1; step <= 8; step++) {
    const part = step / 8;
    await send('touchMove', [at([from[0] + (to[0] - from[0]) * part, from[1] + (to[1] - from[1]) * part])]);
  }
  await send('touchEnd', []);
  await session.detach();
  scrolledWhileDrawing = (await page.evaluate(() => window.scrollY)) - before;
}

/** What axe-core finds by WCAG 2.2 AA (Deque’s rules). */
async function axeComplaints(): Promise<string[]> {
  await page.addScriptTag({ content: readFileSync(createRequire(import.meta.url).resolve('axe-core'), 'utf8') });
  return page.evaluate(async () => {
    const { axe } = window as unknown as {
      axe: { run: (on: Document, options: object) => Promise<{ violations: { id: string }[] }> };
    };
    const tags = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'];
    return (await axe.run(document, { runOnly: tags })).violations.map(({ id }) => id);
  });
}

describe('on a phone, a rider', () => {
  it('comes from the receipt’s picture and draws with a finger, and the page stays where it is', async () => {
    await page.goto(server.url + paths.shelfEntry(rider.shelf, 1));
    await page.getByRole('link', { name: 'Black out part of this picture' }).click();
    await page.getByRole('heading', { name: 'Black out part of a picture' }).waitFor();
    await page.getByText('No box yet.').waitFor();
    await drawByFinger([0.2, 0.6], [0.6, 0.2]);
    await page.getByText('One box.').waitFor();
    expect(scrolledWhileDrawing).toBe(0);
    expect(await boxes().first().innerText()).toMatch(
      /Box 1: (19|20|21) % from the left, (19|20|21) % from the top, (39|40|41) % wide/,
    );
    expect(await page.evaluate(() => document.documentElement.scrollWidth > window.innerWidth)).toBe(false);
  });

  it('adds a box by its button, moves and sizes it by keys, removes it and takes that back', async () => {
    await page.getByRole('button', { name: 'Add a box' }).click();
    await page.getByText('2 boxes.').waitFor();
    const added = page.getByRole('button', { name: /^Box 2/ });
    expect(await added.evaluate((one) => one === document.activeElement)).toBe(true);
    const before = await page.evaluate(() => window.scrollY);
    await page.keyboard.press('ArrowRight');
    await page.keyboard.press('ArrowDown');
    await page.keyboard.press('Shift+ArrowLeft');
    expect(await added.innerText()).toBe('Box 2: 41 % from the left, 41 % from the top, 19 % wide, 20 % high');
    expect(await page.evaluate(() => window.scrollY)).toBe(before);
    await page.getByRole('button', { name: 'Remove box 2' }).click();
    expect(await boxes().count()).toBe(1);
    await page.getByRole('button', { name: 'Undo' }).click();
    expect(await boxes().count()).toBe(2);
    for (let step = 0; step < 4; step++) await page.getByRole('button', { name: 'Undo' }).click();
    expect(await boxes().count()).toBe(1);
  });

  it('sees it as it will be, with targets of 44 px and nothing for axe to complain about', async () => {
    await page.getByRole('button', { name: 'Show as it will be' }).click();
    await page.getByText(/Shown as the copy will be/).waitFor();
    expect(await area().locator('rect').count()).toBe(1);
    const heights = await page.locator('main button').evaluateAll((all) => all.map((one) => one.getBoundingClientRect().height)); // prettier-ignore
    expect(Math.min(...heights)).toBeGreaterThanOrEqual(44);
    expect(await axeComplaints()).toEqual([]);
    await page.getByRole('button', { name: 'Go on drawing' }).click();
  });

  it('loses neither box nor reason to a refusal, and seals once', async () => {
    const reason = page.getByLabel('Reason');
    // A mark that turns the direction of writing cannot be sealed.
    await reason.fill('What it cost.\u202E');
    await page.getByRole('button', { name: 'Seal the blacked-out copy' }).click();
    await page.getByText('Please look at the marked fields.').waitFor();
    expect(await reason.inputValue()).toContain('What it cost.');
    expect(await boxes().count()).toBe(1);
    await reason.fill('What it cost.');
    await page.getByRole('button', { name: 'Seal the blacked-out copy' }).dblclick();
    await page.waitForURL(server.url + paths.shelfEntry(rider.shelf, 2));
    await page.getByText('Blacked-out copy of Receipt, front of line 1. What it cost.').waitFor();
    const { entries } = await readShelf({ shelfId: rider.shelf });
    expect(entries.map(({ kind }) => kind)).toEqual(['opening', 'purchase', 'correction']);
    const copy = entries[2]!.attachments![0]!.sha256;
    const { data, info } = await sharp(await blobStore.read(copy)).raw().toBuffer({ resolveWithObject: true }); // prettier-ignore
    const at = (x: number, y: number) =>
      data[(Math.round(y * info.height) * info.width + Math.round(x * info.width)) * 3];
    expect([at(0.4, 0.4), at(0.8, 0.8)!]).toEqual([0, expect.toSatisfy((value: number) => value > 200)]);
  });

  it('shares for sale, and the reader sees the blacked-out receipt and no other', async () => {
    const { person, machine } = rider;
    const link = await createViewingLink({ machineId: machine, by: person.id, label: 'For sale', expiresAt: null, scope: forSaleScope }); // prettier-ignore
    const reader = await (await browser.newContext({ viewport: { width: 390, height: 844 } })).newPage();
    reader.setDefaultTimeout(90_000);
    await reader.goto(`${server.url}/v/${link.token}`);
    await reader.waitForURL(/\/view\//);
    await reader.goto(server.url + paths.viewingEntry(link.id, 2));
    const plates = reader.getByRole('list', { name: 'Plates: photos and receipts' }).getByRole('img');
    await plates.first().waitFor();
    expect(await plates.evaluateAll((all) => all.map((one) => (one as HTMLImageElement).alt))).toEqual([
      'Receipt, front: blacked-out copy',
    ]);
    await plates.first().scrollIntoViewIfNeeded();
    await reader.waitForFunction(() => [...document.images].every((one) => one.naturalWidth > 0));
    await reader.getByRole('heading', { name: 'Said later of the receipt' }).waitFor();
  });
});
