import { chromium, type Browser, type Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { write } from '@/db/index';
import { updatePerson } from '@/db/queries/people';
import { hashPassword } from '@/lib/auth/password';
import { mailNames, readKeptMail } from '@/lib/ports/mail-folder';
import { paths } from '@/lib/paths';
import { inviteCountersigner } from '@/lib/services/invite-countersigner';
import { readRecord } from '@/lib/services/read-record';
import { buildProofWorld } from '@/tests/setup/proof-world';
import { useServer } from '@/tests/setup/server';
import { useTestDatabase } from '@/tests/setup/test-database';

useTestDatabase();
const server = useServer();
const password = 'torque-then-mark-31';
let world: Awaited<ReturnType<typeof buildProofWorld>>;
let browser: Browser;
let page: Page;
let address: string;

beforeAll(async () => {
  world = await buildProofWorld();
  const passwordHash = await hashPassword(password);
  for (const { id } of [world.technician, world.person]) {
    await write((transaction) => updatePerson(id, { passwordHash }, { transaction }));
  }
  const { person, machine: machineId, seq } = world;
  const input = { email: world.technician.email, message: 'You saw it on the lift on Saturday.' };
  await inviteCountersigner({ person, machineId, seq, input });
  const [newest] = await mailNames();
  const path = /\/countersign\/[A-Za-z0-9_-]{22}/.exec((await readKeptMail(newest!))!.text)?.[0];
  address = server.url + path;
  browser = await chromium.launch({ executablePath: '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu'] });
  page = await (await browser.newContext()).newPage();
});
afterAll(() => browser.close());

async function signIn(on: Page, email: string): Promise<void> {
  await on.getByRole('link', { name: 'Sign in' }).click();
  await on.getByLabel('E-mail address').fill(email);
  await on.getByLabel('Password').first().fill(password);
  await on.getByRole('button', { name: 'Sign in' }).click();
  await on.waitForURL(/\/countersign\/answer\//);
}

describe('a shop that is asked to countersign', () => {
  it('reads the entry and who asks before it signs in', async () => {
    await page.goto(address);
    expect(page.url()).toMatch(/\/countersign\/answer\/[0-9a-f-]{36}$/);
    const text = await page.locator('main').innerText();
    expect(text).toContain(`Imke Vandersloot asks you to countersign entry ${world.seq}`);
    expect(text).toContain('You saw it on the lift on Saturday.');
    expect(text).toContain('10,238 mi');
    expect(await page.getByRole('button', { name: /^Countersign/ }).count()).toBe(0);
  });

  it('is refused its signature when it turns out to be the owner', async () => {
    const own = await (await browser.newContext()).newPage();
    await own.goto(address);
    await signIn(own, world.person.email);
    expect(await own.locator('main').innerText()).toContain('must come from somebody else');
    expect(await own.getByRole('button', { name: /^Countersign/ }).count()).toBe(0);
    await own.context().close();
  });

  it('comes back from signing in, is asked for what is missing, and countersigns', async () => {
    await signIn(page, world.technician.email);
    const submit = page.getByRole('button', { name: `Countersign entry ${world.seq}` });
    await page.getByLabel('Statement').fill('We checked level and torque.');
    await submit.click();
    await page.getByText('Say in which capacity you vouch for this entry.').waitFor();
    expect(await page.getByLabel('Statement').inputValue()).toBe('We checked level and torque.');
    await page.getByLabel('Inspected the finished work').check({ force: true });
    await submit.click();
    await page.getByText(/^Countersigned \d/).waitFor();
  });

  it('has made an entry of its own, which says that nobody has confirmed the shop', async () => {
    const { entries } = await readRecord({ machineId: world.machine });
    const [signed] = entries[world.seq]!.countersignatures;
    expect(signed?.body).toMatchObject({
      capacity: 'inspected',
      statement: 'We checked level and torque.',
      shop: { name: 'Halyard Cycle Works', confirmedBy: null },
      invitedBy: 'Imke Vandersloot',
    });
    await page.reload();
    expect(await page.locator('main').innerText()).toContain('not confirmed: this could be the owner');
  });

  it('finds its answer on the shop’s page', async () => {
    await page.goto(server.url + paths.shop(world.shop));
    expect(await page.locator('main').innerText()).toMatch(/Countersigned .*, entry \d+/);
  });
});
