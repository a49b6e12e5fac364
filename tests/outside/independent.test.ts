import { execFileSync, spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Finding } from '@/lib/evidence/finding';
import { timeStampRoot } from '@/lib/services/answer-time-stamp';
import { bundleRecord } from '@/lib/services/bundle-record';
import { stampingSettled } from '@/lib/services/stamp-checkpoints';
import { sealRecord } from '../setup/sealed-record';
import { useTestDatabase } from '../setup/test-database';

// Two judges of one record: the project's own command, and a verifier in Python written from the format's description
// alone, with openssl for Ed25519 (RFC 8032) and RFC 3161 tokens. They share no code.
useTestDatabase();

let folder = '';
let text = '';
let root = '';
beforeAll(async () => {
  folder = mkdtempSync(path.join(os.tmpdir(), 'witnessmark-two-'));
  const { machineId } = await sealRecord();
  await stampingSettled();
  text = (await bundleRecord({ machineId, purpose: 'two judges', number: 'WM-TWOJ-0001' })).text;
  root = path.join(folder, 'root.pem');
  writeFileSync(root, timeStampRoot());
});
afterAll(() => rmSync(folder, { recursive: true }));

function judge(record: string): { own: number; independent: number; said: string } {
  const file = path.join(folder, 'record.json');
  writeFileSync(file, record);
  const own = spawnSync('node', ['scripts/verify.mjs', file]).status ?? -1;
  const other = spawnSync('python3', ['tests/outside/independent_verifier.py', file], { encoding: 'utf8' });
  return { own, independent: other.status ?? -1, said: other.stdout };
}

describe('a sealed record before two judges', () => {
  it('is unchanged for both', () => {
    expect(judge(text)).toMatchObject({ own: 0, independent: 0 });
  });

  it('carries tokens that hold, of an authority that is its own and so proves nothing, even by its root', () => {
    const file = path.join(folder, 'stamped.json');
    writeFileSync(file, text);
    const command = ['scripts/verify.mjs', file, '--tsa-roots', root, '--json'];
    const found = JSON.parse(execFileSync('node', command, { encoding: 'utf8', maxBuffer: 1e8 })) as Finding;
    expect(found.outcome).toBe('unchanged');
    expect(found.entries.map(({ proven }) => proven)).toEqual(found.entries.map(() => null));
    expect(found.entries[0]?.stampedBy).toMatchObject([{ trust: 'own' }]);
    const said = execFileSync('python3', ['tests/outside/independent_verifier.py', file, '--tsa-roots', root], {
      encoding: 'utf8',
    });
    expect(said).toMatch(/^unchanged/m);
    expect(said.match(/^proven \S+ \d+ -$/gm)).toHaveLength(found.entries.length);
    expect(JSON.parse(text).logs[0].entries[0].seal.tokens).toHaveLength(1);
  });

  it('is never unchanged for either once one byte differs, wherever it is', () => {
    const bytes = Buffer.from(text, 'utf8');
    // 12 places spread evenly; every byte of a smaller record is tried in the unit tests.
    for (let i = 0; i < 12; i += 1) {
      const place = Math.floor(((i + 0.5) / 12) * bytes.length);
      const changed = Buffer.from(bytes);
      changed[place] = (bytes[place] ?? 0) === 0x41 ? 0x42 : 0x41;
      const { own, independent } = judge(changed.toString('utf8'));
      expect([1, 2], `byte ${place}, own command`).toContain(own);
      expect([1, 2], `byte ${place}, independent`).toContain(independent);
    }
  }, 300_000);

  it('is altered for both when an entry is left out and the rest moved up', () => {
    const bundle = JSON.parse(text);
    bundle.logs[0].entries.splice(1, 1);
    expect(judge(JSON.stringify(bundle))).toMatchObject({ own: 1, independent: 1 });
  });

  it('is altered for both when a part stands under another name', () => {
    const bundle = JSON.parse(text);
    const entry = bundle.logs[0].entries[0];
    const [salt, , value] = JSON.parse(Buffer.from(entry.parts[0], 'base64url').toString('utf8'));
    entry.parts[0] = Buffer.from(JSON.stringify([salt, 'notes', value])).toString('base64url');
    expect(judge(JSON.stringify(bundle))).toMatchObject({ own: 1, independent: 1 });
  });
});
