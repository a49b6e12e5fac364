import { execFileSync, spawnSync } from 'node:child_process';
import { copyFileSync, existsSync, mkdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import type { Finding } from '@/lib/evidence/finding';
import { packetFile, resumePackets } from '@/lib/services/build-packet';
import { publishedKeys } from '@/lib/services/log-keys';
import { requestPacket } from '@/lib/services/request-packet';
import { stampingSettled } from '@/lib/services/stamp-checkpoints';
import { buildProofWorld } from '../setup/proof-world';
import { useTestDatabase } from '../setup/test-database';

// The way of Trillian's frozen dumps: a packet made once by the first version of the format stays in the repository, and
// every later version must find in it what was found then. It is never made again. A later format gets one of its own.
const folder = path.join(import.meta.dirname, 'golden');
const packet = path.join(folder, 'packet-1.pdf');
const expectedFile = path.join(folder, 'packet-1.json');
const mostBytes = 300_000;

useTestDatabase();

interface Expected {
  key: string;
  outcome: Finding['outcome'];
  counts: Finding['counts'];
  logs: { id: string; subject: string; size: number; root: string }[];
  entries: { log: string; seq: number; kind: string | null; leafHash: string; openedParts: string[] }[];
}

function expectedOf(finding: Finding, key: string): Expected {
  return {
    key,
    outcome: finding.outcome,
    counts: finding.counts,
    logs: finding.logs.map(({ id, subject, checkpoint }) => ({ id, subject, size: checkpoint?.size ?? 0, root: checkpoint?.root ?? '' })), // prettier-ignore
    entries: finding.entries.map(({ log, seq, kind, leafHash, openedParts }) => ({ log, seq, kind, leafHash, openedParts: openedParts.map(({ name }) => name) })), // prettier-ignore
  };
}

function check(file: string, key: string): { status: number | null; finding: Finding } {
  const { status, stdout } = spawnSync('node', ['scripts/verify.mjs', file, '--key', key, '--json'], {
    encoding: 'utf8',
    maxBuffer: 50_000_000,
  });
  return { status, finding: JSON.parse(stdout) as Finding };
}

describe('the golden packet of format 1', () => {
  // WITNESSMARK_MAKE_GOLDEN=1, once for each released format.
  it.runIf(process.env.WITNESSMARK_MAKE_GOLDEN === '1' && !existsSync(packet))(
    'is made once',
    { timeout: 120_000 },
    async () => {
      const { person, machine } = await buildProofWorld();
      await stampingSettled();
      const { number } = await requestPacket({ person, machineId: machine, input: { purpose: 'Golden packet of format 1' } as never }); // prettier-ignore
      await resumePackets();
      mkdirSync(folder, { recursive: true });
      copyFileSync(packetFile(number), packet);
      const key = publishedKeys()[0]?.verifierKey ?? '';
      writeFileSync(expectedFile, `${JSON.stringify(expectedOf(check(packet, key).finding, key), null, 2)}\n`);
    },
  );

  it('verifies as it did when it was made: outcome, every entry, every root', () => {
    const expected = JSON.parse(readFileSync(expectedFile, 'utf8')) as Expected;
    const { status, finding } = check(packet, expected.key);
    expect(status).toBe(0);
    expect(expectedOf(finding, expected.key)).toEqual(expected);
    expect(expected.outcome).toBe('unchanged');
    expect(expected.entries.length).toBeGreaterThan(4);
    expect(statSync(packet).size).toBeLessThan(mostBytes);
  });

  it('is unchanged to the verifier that shares no code with this project', () => {
    const said = execFileSync('python3', ['tests/outside/independent_verifier.py', packet], { encoding: 'utf8' });
    expect(said).toMatch(/^unchanged/);
  });
});
