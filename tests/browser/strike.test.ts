import { chromium, type Browser, type Page } from 'playwright-core';
import sharp from 'sharp';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { write } from '@/db/index';
import { updatePerson } from '@/db/queries/people';
import { hashPassword } from '@/lib/auth/password';
import { paths } from '@/lib/paths';
import { confirmReceipt } from '@/lib/services/confirm-receipt';
import { readRecord } from '@/lib/services/read-record';
import { sealWorksheet } from '@/lib/services/seal-worksheet';
import { draftWith, oilChange, receiptFields, riderWithMachine } from '@/tests/db/services/garage-story';
import { useServer } from '@/tests/setup/server';
import { useTestDatabase } from '@/tests/setup/test-database';

useTestDatabase();
const server = useServer();
const password = 'paint-the-bolt-17';
const text = 'Checked hot after the first ride: level at the upper mark, plugs dry.';
let rider: Awaited<ReturnType<typeof riderWithMachine>>;
let browser: Browser;
let page: Page;

beforeAll(async () => {
  rider = await riderWithMachine();
  const { person, machine, shelf } = rider;
  const passwordHash = await hashPassword(password);
  await write((transaction) => updatePerson(person.id, { passwordHash }, { transaction }));
  const receipt = await draftWith({ person, kind: 'receipt', subject: shelf, fields: receiptFields });
  const purchase = await confirmReceipt({ person, draftId: receipt });
  const draftId = await draftWith({ person, kind: 'worksheet', subject: machine, fields: oilChange(purchase) });
  await sealWorksheet({ person, draftId });
  browser = await chromium.launch({ executablePath: '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu'] });
  page = await (await browser.newContext({ viewport: { width: 390, height: 844 } })).newPage();
  // Well under the test's own limit, so that a slow machine is told by what it waited for.
  page.setDefaultTimeout(90_000);
  await page.goto(server.url + paths.signIn);
  await page.getByLabel('E-mail address').fill(person.email);
  await page.getByLabel('Password').first().fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await page.waitForURL(server.url + paths.bench(machine));
});
afterAll(() => browser.close());

const main = () => page.locator('main').innerText();
const isWiderThanScreen = () => page.evaluate(() => document.documentElement.scrollWidth > window.innerWidth);

describe('on a phone, a rider', () => {
  it('writes an addendum and finds it again after the tab was closed', async () => {
    await page.goto(server.url + paths.entry(rider.machine, 2));
    await page.getByRole('link', { name: 'Add an addendum' }).click();
    await page.getByLabel('What it adds').fill(text);
    await page.getByText(/^Saved on the server/).waitFor();
    await page.goto(server.url + paths.bench(rider.machine));
    await page.getByRole('link', { name: 'Go on with Addendum to entry 2, not sealed' }).click();
    await page.getByLabel('What it adds').waitFor();
    expect(await page.getByLabel('What it adds').inputValue()).toBe(text);
    expect(await isWiderThanScreen()).toBe(false);
  });

  it('adds a photo, says what it shows, and seals what stands in the form, once', async () => {
    const picture = await sharp({ create: { width: 640, height: 480, channels: 3, background: '#667788' } }).jpeg().toBuffer(); // prettier-ignore
    const file = { name: 'plug.jpg', mimeType: 'image/jpeg', buffer: picture };
    await page.getByLabel('Choose files').setInputFiles(file);
    await page.getByText(/^On the server/).waitFor();
    await page.getByRole('radio', { name: 'As left' }).check();
    await page.getByLabel('Caption (optional)').fill('Drain plug, dry');
    await page.getByRole('button', { name: 'Seal this addendum' }).dblclick();
    await page.waitForURL(`${server.url}${paths.entry(rider.machine, 2)}#entry-3`);
    const addendum = page.getByRole('article', { name: 'Addendum, entry 3' });
    await addendum.getByText(text).waitFor();
    expect(await addendum.getByRole('img', { name: 'As left: Drain plug, dry' }).count()).toBe(1);
    const { entries } = await readRecord({ machineId: rider.machine });
    expect(entries.map(({ kind }) => kind)).toEqual(['opening', 'terms', 'service', 'addendum']);
    expect(entries[3]?.attachments).toMatchObject([{ role: 'as-left', caption: 'Drain plug, dry' }]);
  });

  it('reads what a strike will do, is asked for a reason, and strikes once', async () => {
    await page.getByRole('link', { name: 'Strike', exact: true }).click();
    await page.getByRole('heading', { name: 'Strike entry 2?' }).waitFor();
    const effects = await page.getByRole('region', { name: 'What will happen' }).innerText();
    expect(effects).toContain('It counts as not done');
    expect(effects).toContain('4.5 US qt of Fernhill V-twin 20W-50, lot 1');
    expect(effects).toContain('Engine oil and filter');
    const strike = page.getByRole('button', { name: 'Strike entry 2' });
    await strike.click();
    await page.getByText('Say why it is struck.').waitFor();
    await page.getByLabel('Why is it struck?').fill('Logged on the wrong machine.');
    await strike.dblclick();
    await page.waitForURL(server.url + paths.entry(rider.machine, 2));
    await page.getByText('Logged on the wrong machine.').first().waitFor();
    const shown = await main();
    expect(shown).toMatch(/Struck by entry 4 on .*, by Imke Vandersloot/);
    expect(shown).toContain('4.25 + 0.25 US qt');
    expect((await readRecord({ machineId: rider.machine })).entries).toHaveLength(5);
  });

  it('sees it under a single line in the ledger, not done on the schedule, and the oil back on the shelf', async () => {
    await page.goto(server.url + paths.record(rider.machine));
    const line = page.getByRole('listitem').filter({ hasText: 'Struck by entry 4' });
    const decoration = await line.locator('s').first().evaluate((title) => getComputedStyle(title).textDecorationLine); // prettier-ignore
    expect(decoration).toBe('line-through');
    expect(await isWiderThanScreen()).toBe(false);
    await page.goto(server.url + paths.schedule(rider.machine));
    expect(await main()).not.toContain('10,238 mi');
    await page.goto(server.url + paths.shelf(rider.shelf));
    expect(await main()).toContain('All 6 US qt left');
  });

  it('strikes the strike, and the entry stands again', async () => {
    await page.goto(server.url + paths.strike(rider.machine, 4));
    await page.getByText('Entry 2 stands again.').waitFor();
    await page.getByLabel('Why is it struck?').fill('It was the right machine after all.');
    await page.getByRole('button', { name: 'Strike entry 4' }).click();
    await page.waitForURL(server.url + paths.entry(rider.machine, 4));
    await page.goto(server.url + paths.shelf(rider.shelf));
    expect(await main()).toContain('1.5 of 6 US qt left');
  });

  it('erases the author of an entry for good, and reads where that is recorded', async () => {
    await page.goto(server.url + paths.entry(rider.machine, 2));
    await page.getByText('More', { exact: true }).click();
    await page.getByRole('link', { name: 'Erase a part of entry 2' }).click();
    await page.getByRole('radio', { name: 'Author' }).check();
    await page.getByRole('button', { name: 'Erase for good' }).click();
    await page.getByText(/Type “erase” into this field/).waitFor();
    // What was chosen before the refusal is still chosen.
    expect(await page.getByRole('radio', { name: 'Author' }).isChecked()).toBe(true);
    await page.getByLabel('Type “erase” to go on').fill('erase');
    await page.getByRole('button', { name: 'Erase for good' }).click();
    await page.waitForURL(server.url + paths.entry(rider.machine, 2));
    await page.getByText(/Erased for good on .*, as recorded in/).waitFor();
    expect((await readRecord({ machineId: rider.machine })).entries[2]).toMatchObject({
      author: null,
      erased: ['author'],
    });
  });
});
