import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { machines, shelves } from '@/db/models/machines';
import { people } from '@/db/models/people';
import { invitations } from '@/db/models/proof';
import { paths } from '@/lib/paths';
import { createViewingLink } from '@/lib/services/create-viewing-link';
import { shopOf } from '@/db/queries/shops';
import { useDemo } from '../setup/demo';
import { cookieOf, useServer } from '../setup/server';

// Every screen of the demo at a phone's and a desk's width, light and dark: axe (WCAG 2.2 A and AA, and best practice)
// finds nothing, nothing is wider than the screen, and the browser has nothing to complain about.
useDemo();
const server = useServer();
const axe = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');

let browser: Browser;
beforeAll(async () => {
  browser = await chromium.launch({ executablePath: '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu'] });
});
afterAll(() => browser.close());

type Who = 'nobody' | 'imke' | 'teodora' | 'steward' | 'reader';
const emails: Partial<Record<Who, string>> = {
  imke: 'imke@witnessmark.example',
  teodora: 'teodora@halyard.example',
  steward: 'steward@witnessmark.example',
};

async function contextOf(who: Who, size: { width: number; height: number }, scheme: 'light' | 'dark') {
  const context = await browser.newContext({
    viewport: size,
    colorScheme: scheme,
    bypassCSP: true,
    reducedMotion: 'reduce',
  });
  const email = emails[who];
  if (email !== undefined) {
    const person = await people.find({ email });
    if (person === null) throw new Error(`no ${email}`);
    const [name = '', value = ''] = (await cookieOf(person)).split(/=(.*)/s);
    await context.addCookies([{ name, value, url: server.url }]);
  }
  return context;
}

async function screens(): Promise<Record<Who, string[]>> {
  const sorrel = (await machines.all()).find(({ model }) => model.startsWith('Sorrel'));
  const wren = (await machines.all()).find(({ model }) => model.startsWith('Wren'));
  const imke = await people.find({ email: 'imke@witnessmark.example' });
  const teodora = await people.find({ email: 'teodora@halyard.example' });
  const [shelf] = await shelves.all({ createdBy: imke?.id ?? '' });
  const shop = teodora === null ? null : await shopOf(teodora.id);
  const open = (await invitations.all({ answeredAt: null }))[0];
  if (!sorrel || !wren || !imke || !shelf || !shop || !open) throw new Error('The demo is not whole.');
  const link = await createViewingLink({ machineId: sorrel.id, by: imke.id, label: 'Screens', expiresAt: null });
  return {
    nobody: [paths.home, paths.signIn, paths.signUp, paths.forgotPassword, paths.verify, paths.method, '/no-such-page'],
    imke: [
      paths.bench(sorrel.id), paths.record(sorrel.id), paths.entry(sorrel.id, 0), paths.entry(sorrel.id, 1), paths.entry(sorrel.id, 2), paths.entry(sorrel.id, 11),
      paths.entry(sorrel.id, 12), paths.entry(sorrel.id, 16), paths.inviteShop(sorrel.id, 11), paths.schedule(sorrel.id), paths.specSheet(sorrel.id),
      paths.machineSettings(sorrel.id), paths.proof(sorrel.id), paths.shelf(shelf.id), paths.shelfEntry(shelf.id, 1), paths.bench(wren.id),
      paths.newMachine, paths.account, paths.garage, paths.newWorksheet(sorrel.id), paths.newReceipt,
      paths.entry(sorrel.id, 15), paths.addendum(sorrel.id, 0), paths.addendum(sorrel.id, 11), paths.strike(sorrel.id, 11), paths.strike(sorrel.id, 0), paths.erase(sorrel.id, 11),
      paths.shelfStrike(shelf.id, 1), paths.shelfErase(shelf.id, 1), paths.blackOut(sorrel.id, 11), paths.shelfBlackOut(shelf.id, 1),
    ],
    teodora: [paths.shop(shop.id), paths.invitationAnswer(open.id)],
    steward: [paths.steward, paths.stewardMail, paths.stewardShops],
    reader: [`/v/${link.token}`, paths.viewing(link.id), paths.viewingEntry(link.id, 11)],
  }; // prettier-ignore
}

interface AxeWindow {
  axe: {
    run: (
      context: Document,
      options: object,
    ) => Promise<{ violations: { id: string; nodes: { target: string[] }[] }[] }>;
  };
}

async function complaints(page: Page, address: string): Promise<string[]> {
  const found: string[] = [];
  page.on('console', (message) => {
    if (message.type() === 'error' && !/status of 404/.test(message.text())) found.push(`console: ${message.text()}`);
  });
  page.on('pageerror', (error) => found.push(`error: ${error.message}`));
  await page.goto(server.url + address, { waitUntil: 'networkidle' });
  const wide = await page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth);
  if (wide > 0) found.push(`${wide} px wider than the screen`);
  await page.evaluate(axe);
  const violations = await page.evaluate(async () => {
    const { axe: checker } = window as unknown as AxeWindow;
    const tags = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'];
    const result = await checker.run(document, { runOnly: { type: 'tag', values: tags } });
    return result.violations.map(
      ({ id, nodes }) => `axe ${id}: ${nodes.map(({ target }) => target.join(' ')).join(', ')}`,
    );
  });
  return [...found, ...violations];
}

async function visitAll(context: BrowserContext, addresses: string[]): Promise<Record<string, string[]>> {
  const all: Record<string, string[]> = {};
  for (const address of addresses) {
    const page = await context.newPage();
    const found = await complaints(page, address);
    if (found.length > 0) all[address] = found;
    await page.close();
  }
  await context.close();
  return all;
}

const views = [
  { title: 'a phone in the light', size: { width: 390, height: 844 }, scheme: 'light' },
  { title: 'a desk in the dark', size: { width: 1280, height: 860 }, scheme: 'dark' },
] as const;

describe.each(views)('every screen on $title', ({ size, scheme }) => {
  it.each(['nobody', 'imke', 'teodora', 'steward', 'reader'] as const)(
    'gives %s nothing to complain about',
    async (who) => {
      const addresses = (await screens())[who];
      expect(await visitAll(await contextOf(who, size, scheme), addresses)).toEqual({});
    },
    400_000,
  );
});
