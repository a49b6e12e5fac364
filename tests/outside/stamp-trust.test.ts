import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { toHex } from '@/lib/evidence/bytes';
import { checkSignedData } from '@/lib/evidence/cms';
import { oids } from '@/lib/evidence/oids';
import { readRoots } from '@/lib/evidence/roots';
import { StampTrust } from '@/lib/evidence/stamp-trust';
import { checkToken, isTokenOf } from '@/lib/evidence/token';
import { generalizedTime, oid } from '@/lib/ports/der';
import { makeAuthority, makeParty, makeToken } from '../unit/evidence/build-authority';
import { type KeyKind, makeOpensslAuthority, Openssl, opensslToken } from './openssl-authority';

// The judge is OpenSSL 3 (`openssl ts`, `openssl cms`), which shares no code with what is tested.
const openssl = new Openssl();
afterAll(() => openssl.remove());

const note = 'demo.example/6f1c2a34-0000-4000-8000-000000000001\n3\nqkX=\n\n— demo.example AAAA\n';
/** Whether a reader who brought this root may call a token proof of a text. */
function isProof(token: Uint8Array, text: string, root: Uint8Array | StampTrust): boolean {
  const trust = root instanceof StampTrust ? root : new StampTrust([root]);
  try {
    const checked = checkToken(token);
    return isTokenOf(checked, text) && trust.of(checked).trust === 'independent';
  } catch {
    return false;
  }
}

describe('a token that openssl made', () => {
  it.each<[KeyKind, string, string[]]>([
    ['P-256', 'sha256', []],
    ['P-384', 'sha384', []],
    ['P-521', 'sha512', []],
    // A digest longer than the curve is cut (FIPS 186-5 §6.4.2).
    ['P-256', 'sha512', []],
    ['RSA', 'sha256', []],
    ['RSA', 'sha512', ['-sigopt', 'rsa_padding_mode:pss', '-sigopt', 'rsa_pss_saltlen:32']],
  ])('on %s with %s is proof by its root, for both, and by nothing else', (kind, digest, signing) => {
    const { root } = makeOpensslAuthority(openssl, kind, signing);
    const other = makeParty({ name: 'Quill root', pathLength: 'unlimited' }).certificate;
    for (const named of ['sha1', 'sha256', 'sha512']) {
      const token = opensslToken(openssl, note, { digest, named });
      const both = (text: string, by: Uint8Array) => [isProof(token, text, by), openssl.takesToken(token, text, by)];
      expect(both(note, root), `named by ${named}`).toEqual([true, true]);
      expect(both(`${note} `, root)).toEqual([false, false]);
      expect(both(note, other)).toEqual([false, false]);
    }
  });

  it('is proof by a root that is read from the PEM file openssl wrote', () => {
    makeOpensslAuthority(openssl, 'P-256');
    const token = opensslToken(openssl, note);
    const [root] = readRoots(openssl.read('root.pem'));
    expect(new StampTrust(root && [root]).of(checkToken(token))).toEqual({
      signer: 'Quill stamps',
      trust: 'independent',
      root: { name: 'Quill root', sha256: fingerprintOf('root.pem') },
    });
  });
});

const fingerprintOf = (pem: string): string =>
  (openssl.run('x509', '-in', pem, '-noout', '-fingerprint', '-sha256').split('=')[1] ?? '').trim().replaceAll(':', '').toLowerCase(); // prettier-ignore

describe('a token with one thing wrong is refused by openssl too', () => {
  const { root, between, signer } = makeAuthority();
  const genTime = '2026-04-18T23:32:07Z';
  const by = (change: Parameters<typeof makeAuthority>[1]) =>
    makeToken(note, { by: makeParty({ name: 'Quill time stamps', issuer: between, ...change }), carried: [between] });
  const over = (change: Partial<Parameters<typeof makeParty>[0]>) => {
    const wrong = makeParty({ name: 'Quill issuing', issuer: root, pathLength: 0, ...change });
    return makeToken(note, { by: makeParty({ name: 'Quill time stamps', issuer: wrong }), carried: [wrong] });
  };
  const stranger = makeParty({ name: 'Quill time stamps', issuer: between });
  it.each<[string, boolean, Uint8Array]>([
    ['nothing wrong', true, makeToken(note, { by: signer, carried: [between] })],
    ['nothing wrong, named by SHA-1', true, makeToken(note, { by: signer, carried: [between], namedBy: 'sha1' })],
    ['two signers', false, makeToken(note, { by: signer, carried: [between], signers: [signer, stranger] })],
    ['another certificate named', false, makeToken(note, { by: signer, carried: [between, stranger], named: stranger })],
    ['a wrong digest', false, makeToken(note, { by: signer, carried: [between], messageDigest: new Uint8Array(32) })],
    ['another imprint', false, makeToken(note, { by: signer, carried: [between], imprint: new Uint8Array(32) })],
    ['a purpose that is not critical', false, by({ purpose: 'not critical' })],
    ['another purpose', false, by({ purpose: 'something else' })],
    ['another purpose too', false, by({ purpose: 'something else too' })],
    ['no purpose', false, by({ purpose: 'none' })],
    ['a key that may not sign', false, by({ keyUsage: [4] })],
    ['a certificate that had run out', false, by({ until: '2026-04-18T23:32:00Z' })],
    ['a certificate of later', false, by({ from: '2026-04-18T23:33:00Z' })],
    ['a strange critical extension', false, by({ strange: 'critical' })],
    ['a strange harmless extension', true, by({ strange: 'harmless' })],
    ['no certificate between', false, makeToken(note, { by: signer })],
    ['one between that may not issue', false, over({ pathLength: undefined, purpose: 'none', keyUsage: [5] })],
    ['one between that may not sign certificates', false, over({ keyUsage: [0] })],
    ['one between that had run out', false, over({ until: '2026-04-18T23:32:00Z' })],
    ['one between with a strange critical extension', false, over({ strange: 'critical' })],
  ])('%s: %s', (_, isGood, token) => {
    const openssls = openssl.takesToken(token, note, root.certificate, new Date(genTime));
    expect([isProof(token, note, root.certificate), openssls]).toEqual([isGood, isGood]);
  }); // prettier-ignore
});

it('a certificate between that is for something else is refused, which openssl ts does not ask', () => {
  const root = makeParty({ name: 'Quill root', pathLength: 'unlimited' });
  const between = makeParty({ name: 'Quill issuing', issuer: root, pathLength: 0, purpose: 'something else' });
  const by = makeParty({ name: 'Quill time stamps', issuer: between });
  const token = makeToken(note, { by, carried: [between] });
  expect(isProof(token, note, root.certificate)).toBe(false);
  expect(openssl.takesToken(token, note, root.certificate, new Date('2026-04-18T23:32:07Z'))).toBe(true);
});

describe('a token with one bit turned', () => {
  const genTime = '2026-04-18T23:32:07Z';
  const { root, between, signer } = makeAuthority();
  const token = makeToken(note, { by: signer, carried: [between], genTime });
  const trust = new StampTrust([root.certificate]);
  const said = checkToken(token);
  const turned = (bit: number) => token.map((byte, place) => (place === bit >> 3 ? byte ^ (0x80 >> (bit & 7)) : byte));
  // All that is signed, or says who signed: the content, the signer's certificate, the signed attributes and the value.
  const place = (bytes: Uint8Array) => Buffer.from(token).indexOf(bytes);
  const info = [place(oid('1.2.3.4.1')) - 3, place(generalizedTime(new Date(genTime))) + 17] as const;
  const certificate = [place(signer.certificate), place(signer.certificate) + signer.certificate.length] as const;
  const attributes = [place(oid(oids.contentType)) - 2, token.length] as const;
  const isSigned = (bit: number) =>
    [info, certificate, attributes].some(([from, to]) => bit >> 3 >= from && bit >> 3 < to);

  it('is found wherever something is signed, and elsewhere says what it said, by the same signer', () => {
    const taken: number[] = [];
    // Every seventh bit: 7 has no divisor in common with 8, so every place in a byte is met.
    for (let bit = 0; bit < token.length * 8; bit += 7) {
      const changed = turned(bit);
      if (!isProof(changed, note, trust)) continue;
      taken.push(bit);
      const { genTime: at, serial, policy, imprint, signer: by } = checkToken(changed);
      expect([at, serial, policy, toHex(imprint), by.sha256]).toEqual([
        said.genTime, said.serial, said.policy, toHex(said.imprint), said.signer.sha256,
      ]); // prettier-ignore
    }
    expect(taken.filter(isSigned)).toEqual([]);
    expect(isProof(token, note, trust)).toBe(true);
  }); // prettier-ignore

  it('is never proof where openssl refuses it', () => {
    const onlyOurs: number[] = [];
    for (let bit = 0; bit < token.length * 8; bit += 89) {
      const changed = turned(bit);
      if (isProof(changed, note, trust) && !openssl.takesToken(changed, note, root.certificate, new Date(genTime)))
        onlyOurs.push(bit);
    }
    expect(onlyOurs).toEqual([]);
  });
});

describe('a detached signature that openssl made', () => {
  beforeAll(() => {
    openssl.write('paper.bin', Buffer.concat([Buffer.from('before '), Buffer.from('after')]));
  });
  it.each<[KeyKind, string, string[]]>([
    ['P-256', 'sha256', []],
    ['P-521', 'sha512', []],
    ['RSA', 'sha384', []],
    ['RSA', 'sha256', ['-keyopt', 'rsa_padding_mode:pss']],
  ])('on %s with %s holds over its pieces and over nothing else', (kind, digest, padding) => {
    makeOpensslAuthority(openssl, kind);
    const sign = ['-sign', '-binary', '-cades', '-in', 'paper.bin', '-signer', 'papers.pem', '-inkey', 'papers.key', ...padding];
    openssl.run('cms', ...sign, '-md', digest, '-outform', 'DER', '-out', 'paper.p7s');
    const der = openssl.read('paper.p7s');
    const check = (...pieces: string[]) =>
      checkSignedData({ der, contentType: oids.data, detached: pieces.map((piece) => Buffer.from(piece)) });
    const checked = check('before ', 'after');
    expect(checked).toMatchObject({ content: null, digest, signer: { name: 'Quill papers' } });
    expect(Math.abs(Date.parse(checked.signingTime ?? '') - Date.now())).toBeLessThan(120_000);
    expect(der.length - checked.signature.length).toBeGreaterThan(0);
    expect(Buffer.from(der).indexOf(checked.signature)).toBeGreaterThan(0);
    expect(() => check('before ', 'AFTER')).toThrow('its digest differs');
    expect(() => check()).toThrow('its digest differs');
    expect(() => checkSignedData({ der, contentType: oids.data })).toThrow('What was signed is missing');
    expect(() => checkSignedData({ der, contentType: oids.tstInfo, detached: [] })).toThrow('Something else was signed');
  }); // prettier-ignore
});
