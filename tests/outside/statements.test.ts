import { execFileSync, spawnSync } from 'node:child_process';
import { createHash, createPublicKey } from 'node:crypto';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { p256 } from '@noble/curves/nist.js';
import {
  author, buildRecord, type LogBuilder, signedText, type TestRecord, unsignedBundle,
} from '../unit/evidence/build-record'; // prettier-ignore
import { derSignature, type Forgery, newDeviceKey, numbersOf, signStatement } from '../unit/evidence/sign-statement';

// Signatures made outside the server, before three judges: the project's own command, the Python verifier written from
// the format's description and W3C WebAuthn Level 2 §7.2, and openssl alone.
const key = newDeviceKey();
const technician = { person: 'c0ffee00-0000-4000-8000-000000000004', name: 'Teodora Lindqvist', role: 'shop' };
const words = { capacity: 'inspected', statement: 'We looked at the finished work.', invitedBy: author.person };
let folder = '';
let record: TestRecord;
beforeAll(() => {
  folder = mkdtempSync(path.join(os.tmpdir(), 'witnessmark-statements-'));
  record = buildRecord();
});
afterAll(() => rmSync(folder, { recursive: true }));

const sealedAt = '2026-05-01T08:00:00.000Z';
const nameKey = (log: LogBuilder, person = technician.person) =>
  log.append({ kind: 'key', sealedAt, parts: { author: technician, body: { person, publicKey: key.publicKey } } });
function countersign(log: LogBuilder, forgery: Forgery = {}, change: Record<string, unknown> = {}) {
  const statement = { log: log.id, refersTo: record.service, body: words };
  const body = { ...words, signature: signStatement(key, statement, forgery), ...change };
  return log.append({
    kind: 'countersignature',
    sealedAt,
    refersTo: record.service,
    parts: { author: technician, body },
  });
}
/** Exit status of the project's command and of the Python verifier. */
function judge(log: LogBuilder, opens?: (seq: number) => boolean): [own: number | null, independent: number | null] {
  const file = path.join(folder, 'record.json');
  writeFileSync(file, signedText(unsignedBundle(record, { logs: [log.toLog(opens), record.shelf.toLog()] })));
  const own = spawnSync('node', ['scripts/verify.mjs', file]).status;
  return [own, spawnSync('python3', ['tests/outside/independent_verifier.py', file]).status];
}

describe('a statement signed by the signer’s own key', () => {
  it('is accepted by openssl over authenticator data and the hash of the client data', () => {
    const made = signStatement(key, { log: record.machine.id, refersTo: record.service, body: words });
    const put = (name: string, bytes: Buffer | string) => {
      writeFileSync(path.join(folder, name), bytes);
      return path.join(folder, name);
    };
    const bytes = (member: keyof typeof made) => Buffer.from(made[member], 'base64url');
    const spki = createPublicKey({ key: bytes('publicKey'), format: 'der', type: 'spki' });
    const pem = put('key.pem', spki.export({ type: 'spki', format: 'pem' }).toString());
    const hash = createHash('sha256').update(bytes('clientDataJSON')).digest();
    const data = put('data', Buffer.concat([bytes('authenticatorData'), hash]));
    const said = execFileSync(
      'openssl',
      ['dgst', '-sha256', '-verify', pem, '-signature', put('signature', bytes('signature')), data],
      { encoding: 'utf8' },
    );
    expect(said.trim()).toBe('Verified OK');
  });

  it('is unchanged for both verifiers, with a low and with a high s', () => {
    for (const isHigh of [false, true]) {
      const log = record.machine.fork();
      nameKey(log);
      const refersTo = record.service;
      const made = signStatement(key, { log: log.id, refersTo, body: words });
      const [r, s] = numbersOf(Buffer.from(made.signature, 'base64url'));
      const n = p256.Point.Fn.ORDER;
      const chosen = s > n / 2n === isHigh ? s : n - s;
      countersign(log, {}, { signature: { ...made, signature: derSignature(r, chosen).toString('base64url') } });
      expect(judge(log), isHigh ? 'high s' : 'low s').toEqual([0, 0]);
    }
  });

  it('is unchanged for both when the owner signed an entry, in an entry of its own', () => {
    const log = record.machine.fork();
    log.append({ kind: 'key', sealedAt, parts: { author, body: { person: author.person, publicKey: key.publicKey } } });
    const body = signStatement(key, { log: log.id, refersTo: record.service, body: {} });
    log.append({ kind: 'signature', sealedAt, refersTo: record.service, parts: { author, body } });
    expect(judge(log)).toEqual([0, 0]);
  });

  it('is altered for neither when the entry that names the key is closed', () => {
    const log = record.machine.fork();
    const { seq } = nameKey(log);
    countersign(log);
    expect(judge(log, (at) => at !== seq)).toEqual([0, 0]);
  });

  it.each<[string, Forgery]>([
    ['another type', { type: 'webauthn.create' }],
    ['another challenge', { challenge: 'AAAA' }],
    ['plain http', { origin: 'http://records.garage.example' }],
    ['the relying party of another site', { rpId: 'elsewhere.example' }],
    ['a bare top-level label', { rpId: 'example' }],
    ['nobody present', { flags: 0x04 }],
    ['nobody verified', { flags: 0x01 }],
    ['a frame of another site', { crossOrigin: true }],
    ['a member twice', { moreClientData: ',"origin":"https://records.garage.example"' }],
    ['authenticator data too long', { moreAuthenticatorData: Buffer.from([0xa0]) }],
    ['r of nought', { signed: () => derSignature(0n, 1n) }],
    ['r and s not in DER', { signed: () => Buffer.alloc(64, 1) }],
  ])('is altered for both with %s', (_, forgery) => {
    const log = record.machine.fork();
    nameKey(log);
    countersign(log, forgery);
    expect(judge(log)).toEqual([1, 1]);
  });

  it('is altered for both in another capacity', () => {
    const log = record.machine.fork();
    nameKey(log);
    countersign(log, {}, { capacity: 'did-the-work' });
    expect(judge(log)).toEqual([1, 1]);
  });

  it('is altered for both with the key of somebody else, named later, or struck before', () => {
    const [others, later, struck] = [record.machine.fork(), record.machine.fork(), record.machine.fork()];
    nameKey(others, author.person);
    countersign(others);
    expect(judge(others), 'somebody else').toEqual([1, 1]);
    countersign(later);
    nameKey(later);
    expect(judge(later), 'later').toEqual([1, 1]);
    const refersTo = nameKey(struck);
    struck.append({ kind: 'strike', sealedAt, refersTo, parts: { author, body: { reason: 'Lost.' } } });
    countersign(struck);
    expect(judge(struck), 'struck').toEqual([1, 1]);
  });
});
