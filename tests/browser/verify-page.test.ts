import { readFileSync } from 'node:fs';
import { pathToFileURL } from 'node:url';
import { chromium, type Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { bundleRecord } from '@/lib/services/bundle-record';
import { verifyPageFile } from '@/scripts/build-verify';
import { buildProofWorld } from '@/tests/setup/proof-world';
import { useTestDatabase } from '@/tests/setup/test-database';
import { check, describeChecks } from './check-story';

useTestDatabase();
let browser: Browser;
let record: string;
let older: string;

beforeAll(async () => {
  const { machine } = await buildProofWorld();
  const made = await bundleRecord({ machineId: machine, purpose: 'to be checked', number: 'WM-TEST-2345' });
  record = made.text;
  older = made.bundle.logs[0]?.entries[0]?.seal.checkpoint ?? '';
  browser = await chromium.launch({ executablePath: '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu'] });
});
afterAll(() => browser.close());

describeChecks('in verify.html from disk', 'file', {
  browser: () => browser,
  address: () => pathToFileURL(verifyPageFile).href,
  record: () => record,
  older: () => older,
});

describe('verify.html', () => {
  it('can stop a check that takes too long, and the page stops one by itself', async () => {
    const page = await (await browser.newContext()).newPage();
    await page.clock.install();
    await page.addInitScript(() => {
      // A worker that is there and never answers, as a hostile file could make it.
      class Endless extends EventTarget {
        onmessage: ((event: { data: unknown }) => void) | null = null;
        constructor() {
          super();
          queueMicrotask(() => queueMicrotask(() => this.onmessage?.({ data: { kind: 'ready' } })));
        }
        postMessage() {}
        terminate() {}
      }
      Object.assign(globalThis, { Worker: Endless });
    });
    await page.goto(pathToFileURL(verifyPageFile).href);
    await page.clock.runFor(1000);
    const file = { name: 'endless.json', mimeType: 'application/json', buffer: Buffer.from(record) };
    const input = page.locator('input[aria-label="Packet, export or record.json"]');
    await input.setInputFiles(file);
    await page.clock.runFor(1000);
    await page.getByRole('button', { name: 'Stop' }).click();
    expect(await page.getByText('Checking endless.json').count()).toBe(0);
    await input.setInputFiles(file);
    await page.clock.runFor(1000);
    await page.getByText('Checking endless.json').waitFor();
    await page.clock.runFor(181_000);
    await page.getByText('took longer than 3 minutes').waitFor();
    await page.context().close();
  });

  it('checks in the page itself where a browser has no workers, under the same policy', async () => {
    const page = await (await browser.newContext()).newPage();
    const refused: string[] = [];
    page.on('console', (message) => void (message.type() === 'error' && refused.push(message.text())));
    await page.addInitScript(() => Object.assign(globalThis, { Worker: undefined }));
    await page.goto(pathToFileURL(verifyPageFile).href);
    await page.getByText('Ready. The file stays on this device').waitFor();
    expect((await check(page, record)).outcome).toBe('unchanged');
    expect(refused).toEqual([]);
    await page.context().close();
  });

  it('verify.html is smaller than a photo and its policy lets it reach nothing', () => {
    const text = readFileSync(verifyPageFile, 'utf8');
    expect(text.length).toBeLessThan(1_500_000);
    const policy = /Content-Security-Policy" content="([^"]*)"/.exec(text)?.[1] ?? '';
    expect(policy).toMatch(/^default-src 'none'; script-src 'sha256-[^']+' 'sha256-[^']+'; style-src 'sha256-[^']+';/);
    expect(policy).not.toMatch(/connect-src|unsafe|https?:/);
  });
});
