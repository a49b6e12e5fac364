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
const vin = 'AAACRVSR3NA000417';
let world: Awaited<ReturnType<typeof buildProofWorld>>;
let browser: Browser;
let rider: Page;
let reader: Page;
let address = '';

beforeAll(async () => {
  world = await buildProofWorld();
  const passwordHash = await hashPassword(password);
  await write((transaction) => updatePerson(world.person.id, { passwordHash }, { transaction }));
  browser = await chromium.launch({ executablePath: '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu'] });
  rider = await (await browser.newContext({ viewport: { width: 390, height: 844 } })).newPage();
  reader = await (await browser.newContext({ viewport: { width: 390, height: 844 } })).newPage();
  await rider.goto(`${server.url}${paths.signIn}?next=${encodeURIComponent(paths.proof(world.machine))}`);
  await rider.getByLabel('E-mail address').fill(world.person.email);
  await rider.getByLabel('Password').first().fill(password);
  await rider.getByRole('button', { name: 'Sign in' }).click();
  await rider.waitForURL(server.url + paths.proof(world.machine));
});
afterAll(() => browser.close());

const form = () => rider.getByRole('form', { name: 'Make a viewing link' });
const sentence = () => form().getByText(/^Opens \d+ of/);
/** A radio covers its cell, so it is pressed by keyboard as it would be without a mouse. */
const choose = async (name: string | RegExp) => {
  const radio = form().getByRole('radio', { name });
  await radio.focus();
  await rider.keyboard.press('Space');
  expect(await radio.isChecked()).toBe(true);
};

describe('a rider who chooses what a link opens, on a phone', () => {
  it('is told at once what each choice does, by keyboard alone', async () => {
    expect(await sentence().innerText()).toBe('Opens 3 of 3 entries; 0 shown as withheld.');
    await choose('Choose');
    await form().getByRole('button', { name: 'None' }).press('Enter');
    expect(await sentence().innerText()).toBe('Opens 2 of 3 entries; 1 shown as withheld.');
    await form().getByRole('button', { name: 'All' }).press('Enter');
    await form().getByLabel('Finished from').fill('2099-01-01');
    expect(await sentence().innerText()).toBe('Opens 2 of 3 entries; 1 shown as withheld.');
    expect(
      await form()
        .getByRole('checkbox', { name: /Left out by/ })
        .isDisabled(),
    ).toBe(true);
    expect(await rider.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(390);
    const targets = await form()
      .locator('label:has(input[type=checkbox]), button, a')
      .evaluateAll((all) => all.map((one) => one.getBoundingClientRect().height));
    expect(targets.length).toBeGreaterThan(8);
    expect(Math.min(...targets)).toBeGreaterThanOrEqual(44);
  });

  it('keeps every choice where the server refuses one, and says so next to the field', async () => {
    await form().getByLabel('Finished from').fill('');
    await form().getByRole('button', { name: 'None' }).press('Enter');
    await form().getByRole('checkbox', { name: 'Notes' }).check({ force: true });
    await form().getByLabel('For whom').fill('A buyer');
    await form().getByRole('button', { name: 'Make a viewing link' }).click();
    await form().getByText('Tick at least one entry, or all of them.').waitFor();
    expect(await form().getByRole('radio', { name: 'Choose' }).isChecked()).toBe(true);
    expect(await form().getByRole('checkbox', { name: 'Notes' }).isChecked()).toBe(true);
    expect(await form().getByRole('checkbox', { name: 'Prices' }).isChecked()).toBe(true);
    expect(await sentence().innerText()).toBe('Opens 2 of 3 entries; 1 shown as withheld.');
  });

  it('sees what the reader will see before anything is shared', async () => {
    await choose(/^For sale/);
    const [preview] = await Promise.all([
      rider.context().waitForEvent('page'),
      form()
        .getByRole('link', { name: /^See what the reader sees/ })
        .click(),
    ]);
    await preview.getByText('Nothing is shared yet').waitFor();
    const text = await preview.locator('main').innerText();
    expect(text).not.toContain(vin);
    expect(text).toContain('withheld');
    await preview.close();
  });

  it('makes the link, and finds it in the list by what it opens', async () => {
    await form().getByLabel('For whom').fill('A buyer');
    await form().getByRole('button', { name: 'Make a viewing link' }).click();
    await rider.getByRole('img', { name: /^QR code/ }).waitFor();
    address = await rider.locator('main bdi', { hasText: '/v/' }).innerText();
    await rider.getByText(/^Opens: For sale: all entries, without/).waitFor();
  });
});

describe('the reader of such a link, on a phone', () => {
  it('reads what was done, without names and VIN, and how much is withheld', async () => {
    await reader.goto(address);
    const text = await reader.locator('main').innerText();
    expect(text).not.toContain(vin);
    expect(text).not.toContain(world.person.name);
    expect(text).toMatch(/3 of 3\s+\d+ parts withheld/);
    expect(await reader.title()).not.toContain(vin);
    expect(await reader.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(390);
    await reader.goto(`${reader.url()}/entries/${world.seq}`);
    const entry = await reader.locator('main').innerText();
    expect(entry).toContain('Name withheld');
    expect(entry).not.toContain(world.person.name);
  });
});
