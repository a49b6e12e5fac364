import { createHash } from 'node:crypto';
import { p256 } from '@noble/curves/nist.js';
import { describe, expect, it } from 'vitest';
import { toBase64Url } from '@/lib/evidence/bytes';
import { checkStatementSignature, isKeyBody, publicKeyText, statementChallenge } from '@/lib/evidence/statement';
import { derSignature, type Forgery, newDeviceKey, numbersOf, signStatement } from './sign-statement';

const log = '6f1c2a34-0000-4000-8000-000000000001';
const refersTo = { seq: 2, leafHash: 'ab'.repeat(32) };
const statement = { log, refersTo, body: { statement: 'We checked level and torque.', capacity: 'inspected' } };
const key = newDeviceKey();
const check = (value: unknown, over = statement) => checkStatementSignature(value, statementChallenge(over));
const forged = (forgery: Forgery) => check(signStatement(key, statement, forgery));

describe('the challenge of a statement', () => {
  it('is the hash of a label, a newline and the canonical form, written out by hand', () => {
    const text =
      'witnessmark/statement/1\n{"body":{"capacity":"inspected","statement":"We checked level and torque."},' +
      `"log":"${log}","refersTo":{"leafHash":"${refersTo.leafHash}","seq":2}}`;
    expect(toBase64Url(statementChallenge(statement))).toBe(createHash('sha256').update(text).digest('base64url'));
  });

  it('leaves the signature out, so that it can be made before it is there', () => {
    const signed = { ...statement, body: { ...statement.body, signature: { publicKey: 'x' } } };
    expect(statementChallenge(signed)).toEqual(statementChallenge(statement));
  });

  it.each([
    ['log', { ...statement, log: '6f1c2a34-0000-4000-8000-000000000009' }],
    ['entry', { ...statement, refersTo: { ...refersTo, seq: 3 } }],
    ['leaf', { ...statement, refersTo: { ...refersTo, leafHash: 'ac'.repeat(32) } }],
    ['capacity', { ...statement, body: { ...statement.body, capacity: 'did-the-work' } }],
  ])('differs for another %s', (_, other) => {
    expect(statementChallenge(other)).not.toEqual(statementChallenge(statement));
  });
});

describe('a signature that OpenSSL made over hand-made WebAuthn data', () => {
  it('holds, and names the site', () => {
    expect(check(signStatement(key, statement))).toEqual({
      site: 'https://records.garage.example',
      publicKey: key.publicKey,
    });
  });

  it('holds when the authenticator signed for a parent domain', () => {
    expect(forged({ rpId: 'garage.example' }).site).toBe('https://records.garage.example');
  });

  it('holds on localhost without TLS', () => {
    expect(forged({ origin: 'http://localhost:3415', rpId: 'localhost' }).site).toBe('http://localhost:3415');
  });

  it('holds with data of extensions behind the counter, once the flags say so', () => {
    // An empty CBOR map is one byte, 0xa0 (RFC 8949 §3.1).
    expect(forged({ flags: 0x85, moreAuthenticatorData: Buffer.from([0xa0]) }).site).toBeDefined();
  });

  it('holds with a low and with a high s: ES256 in WebAuthn asks for neither', () => {
    const made = signStatement(key, statement);
    const [r, s] = numbersOf(Buffer.from(made.signature, 'base64url'));
    const other = derSignature(r, p256.Point.Fn.ORDER - s).toString('base64url');
    expect(other).not.toBe(made.signature);
    expect(check({ ...made, signature: other }).site).toBeDefined();
  });
});

describe('a forged signature is refused', () => {
  const n = p256.Point.Fn.ORDER;
  it.each<[string, Forgery, RegExp]>([
    ['made to register a key', { type: 'webauthn.create' }, /approve/],
    ['over another statement', { challenge: 'AAAA' }, /another statement/],
    ['over plain http', { origin: 'http://records.garage.example' }, /plain http/],
    ['by an authenticator asked for another site', { rpId: 'elsewhere.example' }, /another site/],
    ['by an authenticator asked for a top-level label', { rpId: 'example' }, /another site/],
    ['by an authenticator asked for a name below the page’s', { rpId: 'a.records.garage.example' }, /another site/],
    ['without anybody present', { flags: 0x04 }, /present/],
    ['without anybody verified', { flags: 0x01 }, /verify/],
    ['from inside another page', { crossOrigin: true }, /another site/],
    ['with more data than its flags say', { moreAuthenticatorData: Buffer.from([0xa0]) }, /of its form/],
    ['with less data than its flags say', { flags: 0x85 }, /of its form/],
    ['with r of nought', { signed: () => derSignature(0n, 1n) }, /ES256/],
    ['with s of nought', { signed: () => derSignature(1n, 0n) }, /ES256/],
    ['with r as large as the order of the curve', { signed: () => derSignature(n, 1n) }, /ES256/],
    ['with r and s side by side, not in DER', { signed: () => Buffer.alloc(64, 1) }, /ES256/],
    ['with nothing for a signature', { signed: () => Buffer.alloc(0) }, /ES256/],
  ])('%s', (_, forgery, reason) => {
    expect(() => forged(forgery)).toThrow(reason);
  });

  it('with anything after its DER', () => {
    const made = signStatement(key, statement);
    const longer = Buffer.concat([Buffer.from(made.signature, 'base64url'), Buffer.from([0])]).toString('base64url');
    expect(() => check({ ...made, signature: longer })).toThrow(/ES256/);
  });

  it('with another key beside it', () => {
    expect(() => check({ ...signStatement(key, statement), publicKey: newDeviceKey().publicKey })).toThrow(/ES256/);
  });

  it('moved to another capacity, entry or log', () => {
    const made = signStatement(key, statement);
    for (const other of [
      { ...statement, body: { ...statement.body, capacity: 'did-the-work' } },
      { ...statement, refersTo: { ...refersTo, seq: 4 } },
      { ...statement, log: '6f1c2a34-0000-4000-8000-000000000009' },
    ])
      expect(() => check(made, other)).toThrow(/another statement/);
  });

  it.each([
    ['no object', 'signature'],
    ['nothing', undefined],
    ['a list', []],
    ['a member more', { ...signStatement(key, statement), more: '' }],
    ['a member less', { ...signStatement(key, statement), authenticatorData: undefined }],
    [
      'padding',
      { ...signStatement(key, statement), authenticatorData: `${signStatement(key, statement).authenticatorData}=` },
    ],
    ['client data that is no UTF-8', { ...signStatement(key, statement), clientDataJSON: '_w' }],
  ])('with %s in its place', (_, value) => {
    expect(() => check(value)).toThrow();
  });
});

describe('a public key', () => {
  const point = (text: string) => Buffer.from(text, 'base64url');
  it('is what OpenSSL writes as SubjectPublicKeyInfo', () => {
    expect(publicKeyText(new Uint8Array(point(key.publicKey).subarray(26)))).toBe(key.publicKey);
    expect(isKeyBody({ person: 'c0ffee00-0000-4000-8000-000000000003', publicKey: key.publicKey })).toBe(true);
  });

  it('is none off the curve, compressed, or of another curve', () => {
    const off = point(key.publicKey);
    off[90] = (off[90] ?? 0) ^ 1;
    expect(() => publicKeyText(new Uint8Array(off.subarray(26)))).toThrow(/curve/);
    expect(() => publicKeyText(p256.getPublicKey(new Uint8Array(32).fill(7), true))).toThrow(/uncompressed/);
    const other = point(key.publicKey);
    other[12] = 0x03;
    expect(isKeyBody({ person: 'a', publicKey: other.toString('base64url') })).toBe(false);
    expect(isKeyBody({ person: 'a', publicKey: key.publicKey, more: '' })).toBe(false);
    expect(isKeyBody({ publicKey: key.publicKey })).toBe(false);
  });
});
