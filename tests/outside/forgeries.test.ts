import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { forgeries } from '../unit/evidence/build-forgeries';
import { buildRecord, installation, keyOf, signedText, unsignedBundle } from '../unit/evidence/build-record';

// The same forgeries before both judges: the project's own command, and the verifier in Python, which shares no code
// with it and judges signatures by openssl and packets by poppler.
let folder = '';
beforeAll(() => {
  folder = mkdtempSync(path.join(os.tmpdir(), 'witnessmark-forged-'));
});
afterAll(() => rmSync(folder, { recursive: true }));

function judge(name: string, bytes: Uint8Array): { own: number | null; independent: number | null; said: string } {
  const file = path.join(folder, name);
  writeFileSync(file, bytes);
  const own = spawnSync('node', ['scripts/verify.mjs', file, '--key', keyOf(installation)]);
  const other = spawnSync('python3', ['tests/outside/independent_verifier.py', file], { encoding: 'utf8' });
  return { own: own.status, independent: other.status, said: `${String(own.stdout)}\n${other.stdout}` };
}

it('the record that the forgers begin with is unchanged for both', () => {
  const text = signedText(unsignedBundle(buildRecord()));
  expect(judge('record.json', Buffer.from(text))).toMatchObject({ own: 0, independent: 0 });
});

it.each(forgeries.map((one) => [one.what, one] as const))('a forger who %s passes neither judge', async (_, forged) => {
  const { name, bytes, codes } = forged;
  const { own, independent, said } = judge(name, await bytes());
  expect({ own, said }).toMatchObject({ own: codes.length === 0 ? 2 : 1 });
  expect([1, 2], said).toContain(independent);
});
