import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { chromium, type Browser, type CDPSession, type Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { write } from '@/db/index';
import type { PersonRow } from '@/db/models/people';
import { updatePerson } from '@/db/queries/people';
import { hashPassword } from '@/lib/auth/password';
import type { Finding } from '@/lib/evidence/finding';
import { paths } from '@/lib/paths';
import { mailNames, readKeptMail } from '@/lib/ports/mail-folder';
import { bundleRecord } from '@/lib/services/bundle-record';
import { inviteCountersigner } from '@/lib/services/invite-countersigner';
import { oilChange, draftWith } from '@/tests/db/services/garage-story';
import { buildProofWorld } from '@/tests/setup/proof-world';
import { useServer } from '@/tests/setup/server';
import { useTestDatabase } from '@/tests/setup/test-database';

// Chromium's own virtual authenticator (Chrome DevTools Protocol, domain WebAuthn) behind the browser's real WebAuthn.
useTestDatabase();
const server = useServer({}, { hostName: 'localhost' });
const password = 'torque-then-mark-31';
let world: Awaited<ReturnType<typeof buildProofWorld>>;
let browser: Browser;
let folder: string;

beforeAll(async () => {
  folder = mkdtempSync(path.join(os.tmpdir(), 'witnessmark-passkeys-'));
  world = await buildProofWorld();
  const passwordHash = await hashPassword(password);
  for (const { id } of [world.technician, world.person]) {
    await write((transaction) => updatePerson(id, { passwordHash }, { transaction }));
  }
  browser = await chromium.launch({ executablePath: '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu'] });
});
afterAll(async () => {
  await browser.close();
  rmSync(folder, { recursive: true });
});

interface Device {
  page: Page;
  /** Whether the device recognises who is there; without it, the prompt ends as if it had been cancelled. */
  recognise(isVerified: boolean): Promise<void>;
}
async function deviceOf(person: PersonRow, start: string): Promise<Device> {
  const page = await (await browser.newContext()).newPage();
  page.setDefaultTimeout(30_000);
  const cdp: CDPSession = await page.context().newCDPSession(page);
  await cdp.send('WebAuthn.enable');
  const { authenticatorId } = await cdp.send('WebAuthn.addVirtualAuthenticator', {
    options: {
      protocol: 'ctap2',
      transport: 'internal',
      hasResidentKey: true,
      hasUserVerification: true,
      isUserVerified: true,
      automaticPresenceSimulation: true,
    },
  });
  await page.goto(server.url + start);
  // The invitation is read before anybody signs in; the account page leads to signing in by itself.
  if (!page.url().includes(paths.signIn)) await page.getByRole('link', { name: 'Sign in' }).first().click();
  await page.getByLabel('E-mail address').fill(person.email);
  await page.getByLabel('Password').first().fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  const recognise = (isUserVerified: boolean) =>
    cdp.send('WebAuthn.setUserVerified', { authenticatorId, isUserVerified }).then(() => undefined);
  return { page, recognise };
}
async function addKey(page: Page, name: string): Promise<void> {
  await page.getByLabel('Name of the key').fill(name);
  await page.getByLabel('Present password').last().fill(password);
  await page.getByRole('button', { name: 'Add a key' }).click();
}

describe('an owner with a key of their own', () => {
  let device: Device;
  let entry: string;

  it('adds it on the account page, after the password', async () => {
    device = await deviceOf(world.person, paths.account);
    const { page } = device;
    await page.getByRole('heading', { name: 'Your own key' }).waitFor();
    const form = page.getByRole('form', { name: 'Add a key' });
    await form.getByLabel('Name of the key').fill('Phone');
    await form.getByLabel('Present password').fill('a guess');
    await form.getByRole('button', { name: 'Add a key' }).click();
    await form.getByText('This is not your present password.').waitFor();
    expect(await form.getByLabel('Name of the key').inputValue()).toBe('Phone');
    await form.getByLabel('Present password').fill(password);
    await form.getByRole('button', { name: 'Add a key' }).click();
    await page.getByText('The key Phone is added.').waitFor();
    await page.getByText(/^Added .*, not used yet$/).waitFor();
  });

  it('is told that the device holds one already', async () => {
    const form = device.page.getByRole('form', { name: 'Add a key' });
    await form.getByLabel('Name of the key').fill('Phone again');
    await form.getByLabel('Present password').fill(password);
    await form.getByRole('button', { name: 'Add a key' }).click();
    await device.page.getByText('This device holds a key of yours already.').waitFor();
  });

  it('seals and signs a worksheet in one press', async () => {
    const { page } = device;
    const purchase = { log: '', seq: 0 };
    const fields = Object.fromEntries(
      Object.entries(oilChange(purchase)).filter(([field]) => !field.includes('/draws/')),
    );
    const draft = await draftWith({
      person: world.person,
      kind: 'worksheet',
      subject: world.machine,
      fields: { ...fields, 'odometer/value': '12034' },
    });
    await page.goto(server.url + paths.review(draft));
    await page.getByRole('button', { name: 'Seal and sign with my key' }).click();
    await page.getByRole('heading', { name: 'Own signature', exact: true }).waitFor();
    entry = page.url();
    const text = await page.locator('main').innerText();
    expect(text).toContain('Signed with the signer’s own key, outside this server');
    expect(text).toContain('It shows that the key’s holder approved this request, not what their screen showed.');
    expect(text).toContain(`Approved on ${server.url}`);
    expect(await page.getByRole('button', { name: 'Sign with my own key' }).count()).toBe(0);
    await page.reload();
    expect(page.url()).toBe(entry);
    expect(await page.getByRole('heading', { name: 'Own signature', exact: true }).count()).toBe(1);
  });

  it('keeps an entry sealed when the prompt is cancelled, and signs it later', async () => {
    const { page, recognise } = device;
    await page.goto(server.url + paths.entry(world.machine, world.seq));
    await recognise(false);
    await page.getByRole('button', { name: 'Sign with my own key' }).click();
    await page.getByText('Your key was not used').waitFor();
    await page.getByText('The entry is sealed and stays so.').waitFor();
    await recognise(true);
    await page.getByRole('button', { name: 'Sign with my own key' }).dblclick();
    await page.getByRole('heading', { name: 'Own signature', exact: true }).waitFor();
    await page.reload();
    expect(await page.getByRole('heading', { name: 'Own signature', exact: true }).count()).toBe(1);
  });

  it('finds key and signatures as lines of the record', async () => {
    await device.page.goto(server.url + paths.record(world.machine));
    await device.page.getByText(`Entry ${world.seq} signed by`).waitFor();
    const text = await device.page.locator('main').innerText();
    expect(text.match(/Key of Imke Vandersloot/g)).toHaveLength(1);
    expect(text).toContain(`Entry ${world.seq} signed by Imke Vandersloot`);
  });
});

describe('a technician with a key of their own', () => {
  let device: Device;

  it('adds it beside the answer without losing what was typed', async () => {
    const { person, machine: machineId, seq, technician } = world;
    await inviteCountersigner({ person, machineId, seq, input: { email: technician.email, message: '' } });
    const [newest] = await mailNames();
    const address = /\/countersign\/[A-Za-z0-9_-]{22}/.exec((await readKeptMail(newest!))!.text)?.[0] ?? '';
    device = await deviceOf(technician, address);
    const { page } = device;
    await page.getByLabel('Statement').fill('We checked level and torque.');
    await page.getByText('Sign with a key of your own instead').click();
    await addKey(page, 'Key on the counter');
    await page.getByRole('button', { name: /and sign with my key$/ }).waitFor();
    expect(await page.getByLabel('Statement').inputValue()).toBe('We checked level and torque.');
  });

  it('is left with everything typed when the prompt is cancelled, and nothing is sealed', async () => {
    const { page, recognise } = device;
    await recognise(false);
    await page.getByLabel('Inspected the finished work').check({ force: true });
    await page.getByRole('button', { name: /and sign with my key$/ }).click();
    await page.getByText('Nothing was countersigned.').waitFor();
    expect(await page.getByLabel('Statement').inputValue()).toBe('We checked level and torque.');
    expect(await page.getByLabel('Inspected the finished work').isChecked()).toBe(true);
  });

  it('countersigns with its own signature', async () => {
    const { page, recognise } = device;
    await recognise(true);
    await page.getByRole('button', { name: /and sign with my key$/ }).click();
    await page.getByText(/^Countersigned \d/).waitFor();
    await page.reload();
    const text = await page.locator('main').innerText();
    expect(text).toContain('Signed with the signer’s own key, outside this server');
  });
});

describe('the record of both', () => {
  it('is unchanged for the command that runs anywhere, which names each signature', async () => {
    const { text } = await bundleRecord({ machineId: world.machine, purpose: '', number: 'WM-KEYS-0001' });
    const file = path.join(folder, 'record.json');
    writeFileSync(file, text);
    const { status, stdout } = spawnSync('node', ['scripts/verify.mjs', file, '--json'], { encoding: 'utf8' });
    expect(status).toBe(0);
    const finding = JSON.parse(stdout) as Finding;
    const signed = finding.entries.flatMap(({ kind, deviceSignature }) =>
      deviceSignature === null ? [] : [`${kind} on ${deviceSignature.site}`],
    );
    expect(signed.sort()).toEqual([
      `countersignature on ${server.url}`,
      `signature on ${server.url}`,
      `signature on ${server.url}`,
    ]);
    expect(spawnSync('python3', ['tests/outside/independent_verifier.py', file]).status).toBe(0);
    const report = spawnSync('node', ['scripts/verify.mjs', file], { encoding: 'utf8' }).stdout;
    expect(report).toContain(`signed with the signer’s own key, outside the server, on ${server.url}`);
  });
});
