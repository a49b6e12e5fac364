/**
 * Pictures of the main screens: phone and desk, light and dark, into a temporary folder.
 *
 *   npm run shots                                     of the demo on http://localhost:3000
 *   npm run shots -- --base http://127.0.0.1:3005     of another demo server
 *   npm run shots -- --only bench,record              of some screens
 *   npm run shots -- --list screens.json              of other screens: [{ "name", "path", "signInAs"? }]
 *
 * In a path, `:machine` and `:shelf` stand for the first machine and the shelf of whoever is signed in.
 */
import { mkdtemp, readFile } from 'node:fs/promises';
import os from 'node:os';
import path from 'node:path';
import { parseArgs } from 'node:util';
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core';
import { z } from 'zod';
import { demoAccounts } from '@/db/seed/demo-accounts';
import { paths } from '@/lib/paths';

interface Screen {
  name: string;
  path: string;
  /** E-mail of a demo account; without one the screen is shown to somebody not signed in. */
  signInAs?: string | undefined;
}

const rider = 'imke@witnessmark.example';

const mainScreens: Screen[] = [
  { name: 'landing', path: paths.home },
  { name: 'sign-in', path: paths.signIn },
  { name: 'sign-up', path: paths.signUp },
  { name: 'verify', path: paths.verify },
  { name: 'method', path: paths.method },
  { name: 'bench', path: paths.bench(':machine'), signInAs: rider },
  { name: 'record', path: paths.record(':machine'), signInAs: rider },
  { name: 'entry', path: paths.entry(':machine', 11), signInAs: rider },
  { name: 'schedule', path: paths.schedule(':machine'), signInAs: rider },
  { name: 'spec-sheet', path: paths.specSheet(':machine'), signInAs: rider },
  { name: 'shelf', path: paths.shelf(':shelf'), signInAs: rider },
  { name: 'proof', path: paths.proof(':machine'), signInAs: rider },
  { name: 'garage', path: paths.garage, signInAs: rider },
  { name: 'worksheet', path: paths.newWorksheet(':machine'), signInAs: rider },
  { name: 'receipt', path: paths.newReceipt, signInAs: rider },
  { name: 'account', path: paths.account, signInAs: rider },
];

const sizes = { phone: { width: 390, height: 844 }, desk: { width: 1280, height: 860 } } as const;
const themes = ['light', 'dark'] as const;

const { values: options } = parseArgs({
  options: { base: { type: 'string' }, only: { type: 'string' }, list: { type: 'string' } },
});
const base = (options.base ?? process.env.WITNESSMARK_URL ?? 'http://localhost:3000').replace(/\/$/u, '');

const screenList = z.array(z.object({ name: z.string(), path: z.string(), signInAs: z.string().optional() }));

async function wantedScreens(): Promise<Screen[]> {
  const screens = options.list
    ? screenList.parse(JSON.parse(await readFile(options.list, 'utf8')) as unknown)
    : mainScreens;
  const only = options.only?.split(',');
  return only ? screens.filter(({ name }) => only.includes(name)) : screens;
}

async function open(browser: Browser, size: keyof typeof sizes, theme: (typeof themes)[number]) {
  // One picture of the page as it stands: no motion, and no worker that answers from an older visit.
  return browser.newContext({
    viewport: sizes[size],
    colorScheme: theme,
    reducedMotion: 'reduce',
    serviceWorkers: 'block',
    hasTouch: size === 'phone',
  });
}

async function signIn(page: Page, email: string): Promise<Map<string, string>> {
  const account = demoAccounts.find((known) => known.email === email);
  if (account === undefined) throw new Error(`${email} is no demo account.`);
  await page.goto(base + paths.signIn);
  await page.getByLabel('E-mail').fill(account.email);
  await page.getByLabel('Password', { exact: true }).fill(account.password);
  await page.locator('main button[type=submit]').first().click();
  await page.waitForURL((url) => url.pathname !== paths.signIn);
  await page.goto(base + paths.start);
  const html = await page.content();
  const machine = /\/machines\/(?!new\b)([\w-]+)/u.exec(page.url())?.[1];
  const shelf = /\/shelves\/([\w-]+)/u.exec(html)?.[1];
  return new Map([
    [':machine', machine ?? ''],
    [':shelf', shelf ?? ''],
  ]);
}

async function shoot(context: BrowserContext, screens: Screen[], folder: string, suffix: string) {
  const page = await context.newPage();
  let signedInAs: string | undefined;
  let places = new Map<string, string>();
  for (const screen of screens) {
    if (screen.signInAs !== signedInAs) {
      await context.clearCookies();
      places = screen.signInAs === undefined ? new Map() : await signIn(page, screen.signInAs);
      signedInAs = screen.signInAs;
    }
    const where = screen.path.replace(/:(?:machine|shelf)\b/gu, (word) => places.get(word) ?? word);
    // Two addresses that differ only after the hash would not load anew.
    await page.goto('about:blank');
    const response = await page.goto(base + where, { waitUntil: 'load' });
    await page.evaluate(async () => document.fonts.ready);
    await page.waitForTimeout(400);
    const file = path.join(folder, `${screen.name}-${suffix}.png`);
    await page.screenshot({ path: file, fullPage: true });
    console.log(`${response?.status() ?? ''} ${file}`);
  }
}

const screens = await wantedScreens();
const folder = await mkdtemp(path.join(os.tmpdir(), 'witnessmark-shots-'));
const browser = await chromium.launch({
  executablePath: process.env.CHROMIUM ?? '/usr/bin/chromium',
  args: ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking'],
});
try {
  for (const size of ['phone', 'desk'] as const) {
    for (const theme of themes) {
      const context = await open(browser, size, theme);
      await shoot(context, screens, folder, `${size}-${theme}`);
      await context.close();
    }
  }
} finally {
  await browser.close();
}
