import { readFileSync } from 'node:fs';
import path from 'node:path';
import type { Browser, Page, Request } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { signNote } from '@/lib/evidence/checkpoint';
import { sha256Hex } from '@/lib/evidence/hash';
import { publishedKeys } from '@/lib/services/log-keys';
import { attacker, buildRecord, keyOf, signedText, unsignedBundle } from '../unit/evidence/build-record';

const axe = readFileSync(path.resolve('node_modules/axe-core/axe.min.js'), 'utf8');
const madeUp = buildRecord();

/** A page that is ready to check, and every request it makes from then on; then the cable is pulled. */
async function readyPage(browser: Browser, address: string): Promise<{ page: Page; asked: Request[] }> {
  const page = await (await browser.newContext({ viewport: { width: 390, height: 844 } })).newPage();
  await page.goto(address);
  await page.getByText('Ready. The file stays on this device').waitFor();
  await page.evaluate(() => document.fonts.ready.then(() => undefined));
  const asked: Request[] = [];
  page.context().on('request', (request) => asked.push(request));
  await page.context().setOffline(true);
  return { page, asked };
}

let checks = 0;
export async function check(page: Page, content: string | Buffer): Promise<{ outcome: string | null; text: string }> {
  checks += 1;
  const name = `record-${checks}.json`;
  const file = { name, mimeType: 'application/json', buffer: Buffer.from(content) };
  await page.locator('input[aria-label="Packet, export or record.json"]').setInputFiles(file);
  const report = page.locator('[data-outcome]', { hasText: name });
  await report.waitFor();
  return { outcome: await report.getAttribute('data-outcome'), text: await report.innerText() };
}

async function violations(page: Page): Promise<string[]> {
  await page.evaluate(axe);
  return page.evaluate(async () => {
    const runner = (globalThis as unknown as { axe: { run(): Promise<{ violations: { id: string }[] }> } }).axe;
    return (await runner.run()).violations.map(({ id }) => id);
  });
}

/**
 * What a reader goes through who checks files with the cable pulled: the same on the served page and in `verify.html`.
 * The record and its older checkpoint are asked for when the tests run.
 */
export function describeChecks(
  where: string,
  kind: 'served' | 'file',
  given: { browser: () => Browser; address: () => string; record: () => string; older: () => string },
): void {
  describe(`a reader who checks a file ${where}, with the cable pulled`, () => {
    let page: Page;
    let asked: Request[];
    beforeAll(async () => {
      ({ page, asked } = await readyPage(given.browser(), given.address()));
    });
    afterAll(() => page.context().close());

    it('is told that it is unchanged, whose key that goes by, and which file it was', async () => {
      const { outcome, text } = await check(page, given.record());
      expect(outcome).toBe('unchanged');
      expect(text).toContain('Unchanged, going by the key in the file itself');
      expect(text.indexOf('Whose key?')).toBeLessThan(text.indexOf('Entry by entry'));
      expect(text).toContain(kind === 'served' ? 'publishes this same key' : 'asks nobody');
      expect(text.replaceAll(/\s/g, '')).toContain(sha256Hex(Buffer.from(given.record())));
      expect(text).toContain('10,238 mi');
      expect(text).toContain('not proven');
      expect(await violations(page)).toEqual([]);
    });

    it('is told what was altered', async () => {
      const { outcome, text } = await check(page, given.record().replace('"leaf":"', '"leaf":" '));
      expect(outcome).toBe('altered');
      expect(text).toContain('Altered: this is not what was sealed');
      expect(await violations(page)).toEqual([]);
    });

    it('is warned before anything else of a key that is not the one it should be', async () => {
      const forged = signedText(unsignedBundle(madeUp, { verifierKeys: [keyOf(attacker)] }), attacker);
      if (kind === 'served') {
        const { text } = await check(page, forged);
        expect(text.trimStart()).toMatch(/^This file was not signed with a key of this installation/);
      }
      await page.getByText('Add what you have from elsewhere').click();
      await page.getByLabel('Key, or its fingerprint').fill(publishedKeys()[0]!.verifierKey);
      const { text, outcome } = await check(page, forged);
      expect(text.trimStart()).toMatch(/^This file was not signed with your key/);
      expect(outcome).toBe('altered');
      expect(await violations(page)).toEqual([]);
    });

    it('takes a fingerprint from paper, in groups, and names a file of another key', async () => {
      const groups = publishedKeys()[0]!.fingerprint;
      expect(groups).toMatch(/^([0-9a-f]{4} ){15}[0-9a-f]{4}$/);
      await page.getByLabel('Key, or its fingerprint').fill(groups);
      expect((await check(page, given.record())).text).toContain('Unchanged since it was sealed');
      await page.getByLabel('Key, or its fingerprint').fill('f'.repeat(64));
      await page.getByRole('button', { name: 'Check again with these' }).click();
      await page.locator('p', { hasText: 'lists no key with that fingerprint' }).first().waitFor();
      expect(await page.locator('[data-outcome]').count()).toBe(0);
      await page.getByLabel('Key, or its fingerprint').fill('');
    });

    it('is told what a wrong file is, and that a file is no record', async () => {
      const jpeg = Buffer.from('ffd8ffe000104a46', 'hex');
      await page.locator('input[aria-label="Packet, export or record.json"]').setInputFiles({
        name: 'IMG_1.pdf',
        mimeType: 'application/pdf',
        buffer: jpeg,
      });
      await page.locator('p', { hasText: 'This is a JPEG picture, not a record.' }).first().waitFor();
      expect((await check(page, '{"format":"something else"}')).outcome).toBe('unreadable');
      expect(await violations(page)).toEqual([]);
    });

    it('is given both signed checkpoints when an older one tells another past', async () => {
    const signer = { name: attacker.name, privateKeySeed: attacker.privateKeySeed };
    const log = madeUp.machine;
    const text = signedText(unsignedBundle(madeUp));
    const lie = signNote(`${log.seals[1]!.split('\n')[0]}\n2\n${'A'.repeat(43)}=\n`, log.signer);
    expect(signer.name).toBe(log.signer.name);
    await page.getByLabel('Older packet').setInputFiles({ name: 'note.txt', mimeType: 'text/plain', buffer: Buffer.from(lie) });
    const { outcome } = await check(page, text);
    expect(outcome).toBe('altered');
    const [download] = await Promise.all([
      page.waitForEvent('download'),
      page.getByRole('button', { name: 'Download both checkpoints' }).click(),
    ]);
    expect(download.suggestedFilename()).toBe('both-checkpoints.txt');
    const saved = readFileSync(await download.path(), 'utf8');
    expect(saved).toContain(lie);
    expect(saved).toContain(log.seals[1]);
    await page.getByLabel('Older packet').setInputFiles({ name: 'note.txt', mimeType: 'text/plain', buffer: Buffer.from(given.older()) });
    expect((await check(page, given.record())).text).toContain('The older file is a beginning of this one');
    expect(await violations(page)).toEqual([]);
  }); // prettier-ignore

    it('asks the network for nothing while all that was checked, and sends no byte of a file', () => {
      const sent = asked.filter((request) => !request.url().startsWith('blob:'));
      expect(sent.map((request) => `${request.method()} ${request.url()} ${request.postData() ?? ''}`)).toEqual([]);
    });
  });
}
