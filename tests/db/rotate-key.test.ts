import { execFileSync } from 'node:child_process';
import { chmodSync, readdirSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { beforeEach, describe, expect, it } from 'vitest';
import { env } from '@/lib/env';
import { verifyNote } from '@/lib/evidence/checkpoint';
import { findCheckpoint } from '@/db/queries/logs';
import { keyOfNote, publishedKeys } from '@/lib/services/log-keys';
import { rotateKey } from '@/lib/services/rotate-key';
import { sealRecord } from '../setup/sealed-record';
import { resetTestDatabase, useTestDatabase } from '../setup/test-database';

useTestDatabase();
beforeEach(resetTestDatabase);

const file = path.join(env.dataFolder, 'keys', 'log.pem');
const reading = { body: { odometer: { value: '18300', unit: '[mi_i]', instrument: 0 } } };
const noteOf = async (log: string, size: number) => (await findCheckpoint(log, size))?.note ?? '';

describe('a rotated key', () => {
  it('signs the next seal of a running server, and what the key before it signed still verifies', async () => {
    const { machine, seal } = await sealRecord();
    const older = publishedKeys()[0]!;
    const rotated = await rotateKey();
    const { seq } = await seal(machine.log, 'reading', reading);
    expect(rotated.before).toBe(older.fingerprint);
    expect(verifyNote(await noteOf(machine.log, seq + 1), rotated.verifierKey)).toBe(true);
    expect(verifyNote(await noteOf(machine.log, seq), older.verifierKey)).toBe(true);
    expect(keyOfNote(await noteOf(machine.log, seq))).toEqual(older);
  });

  it('is published first, with every key before it after it', async () => {
    await sealRecord();
    const first = publishedKeys();
    const second = await rotateKey();
    const third = await rotateKey();
    expect(publishedKeys().map(({ verifierKey }) => verifierKey)).toEqual([
      third.verifierKey,
      second.verifierKey,
      ...first.map(({ verifierKey }) => verifierKey),
    ]);
  });

  it('is for its owner alone, is another one, and nothing of the old private key is left', async () => {
    await sealRecord();
    const old = readFileSync(file, 'utf8');
    await rotateKey();
    expect(statSync(file).mode & 0o777).toBe(0o600);
    expect(execFileSync('openssl', ['pkey', '-in', file, '-noout', '-text'], { encoding: 'utf8' })).toContain(
      'ED25519',
    );
    const secret = old.split('\n')[1] ?? '';
    for (const name of readdirSync(path.dirname(file))) {
      expect(readFileSync(path.join(path.dirname(file), name), 'utf8')).not.toContain(secret);
    }
  });

  it('is published under the names of all logs before anything is signed with it', async () => {
    const { machine } = await sealRecord();
    const rotated = await rotateKey();
    const ledger = readFileSync(path.join(path.dirname(file), 'verifier-keys.txt'), 'utf8');
    expect(ledger.trimEnd().split('\n').at(-1)).toBe(rotated.verifierKey);
    expect(keyOfNote(await noteOf(machine.log, 1))).toBeDefined();
  });

  it('is not made while the present key only needs to be put right, unless it is said to be lost', async () => {
    const { machine, seal } = await sealRecord();
    chmodSync(file, 0o644);
    await expect(rotateKey()).rejects.toThrow('No new key was made. The key file');
    await expect(rotateKey({ isOldKeyLost: true })).rejects.toThrow('there is a key file');
    rmSync(file);
    await expect(rotateKey()).rejects.toThrow('is missing');
    await expect(seal(machine.log, 'reading', reading)).rejects.toMatchObject({ code: 'key-unusable' });
    const { verifierKey } = await rotateKey({ isOldKeyLost: true });
    const { seq } = await seal(machine.log, 'reading', reading);
    expect(verifyNote(await noteOf(machine.log, seq + 1), verifierKey)).toBe(true);
  });

  it('leaves a damaged line of the ledger where it is, and every other key published', async () => {
    await sealRecord();
    const ledger = path.join(path.dirname(file), 'verifier-keys.txt');
    writeFileSync(ledger, `${readFileSync(ledger, 'utf8')}nonsense`);
    const { verifierKey } = await rotateKey();
    expect(publishedKeys()[0]?.verifierKey).toBe(verifierKey);
    expect(readFileSync(ledger, 'utf8')).toContain('nonsense\n');
  });
});
