import { execFileSync } from 'node:child_process';
import { createHash, randomBytes } from 'node:crypto';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { fromHex, toHex, utf8 } from '@/lib/evidence/bytes';
import { isTokenOf, readToken } from '@/lib/evidence/token';
import { atTime, now } from '@/lib/ports/clock';
import { checkReply } from '@/lib/ports/time-stamp-authority/check-reply';
import { boolean, context, integer, nullValue, octetString, oid, sequence } from '@/lib/ports/der';
import { oids } from '@/lib/evidence/oids';
import { answerRequest } from '@/lib/ports/time-stamp-authority/own';
import { extension, readChain } from '@/lib/ports/issue-certificates';
import { makeAuthority, ownCertificates } from '@/lib/ports/time-stamp-authority/own-certificates';
import { buildRequest, newNonce } from '@/lib/ports/time-stamp-authority/request';

// The judge is OpenSSL 3 (`openssl ts`), which shares no code with what is tested.
const folder = mkdtempSync(path.join(tmpdir(), 'witnessmark-ts-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

const file = (name: string, content: string | Uint8Array) => {
  const where = path.join(folder, name);
  writeFileSync(where, content);
  return where;
};
const openssl = (...parts: string[]): string =>
  execFileSync('openssl', parts, { encoding: 'utf8', stdio: ['ignore', 'pipe', 'pipe'] });
/** The whole of what OpenSSL says, whether it is content or not. */
const tryOpenssl = (...parts: string[]): string => {
  try {
    return openssl(...parts);
  } catch (error) {
    const { stdout, stderr } = error as { stdout: string; stderr: string };
    return `refused: ${stdout} ${stderr}`;
  }
};
const rootPem = () => file('root.pem', ownCertificates().root.toString());
const digestOf = (text: string) => createHash('sha256').update(text).digest();

const note = 'demo.example/6f1c2a34-0000-4000-8000-000000000001\n3\nqkX=\n\n— demo.example AAAA\n';
function stampOf(text: string) {
  const [digest, nonce] = [digestOf(text), newNonce()];
  const reply = answerRequest(buildRequest({ digest, nonce }));
  return { digest, nonce, reply, checked: checkReply(reply, { digest, nonce, at: now() }) };
}

describe('a time-stamp request', () => {
  it('for “abc” without a nonce is what openssl ts -query writes', () => {
    // RFC 3161 request for SHA-256("abc"), no nonce, certReq true, as written by `openssl ts -query -cert -no_nonce`.
    const known =
      '30390201013031300d060960864801650304020105000420' +
      'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad0101ff';
    expect(toHex(buildRequest({ digest: digestOf('abc') }))).toBe(known);
    const data = file('abc', 'abc');
    const query = path.join(folder, 'abc.tsq');
    openssl('ts', '-query', '-data', data, '-sha256', '-cert', '-no_nonce', '-out', query);
    expect(toHex(new Uint8Array(readFileSync(query)))).toBe(known);
  });

  it('with a nonce is read by OpenSSL as it was meant', () => {
    const nonce = 0xff00_0000_0000_0001n;
    const text = openssl(
      'ts',
      '-query',
      '-in',
      file('n.tsq', buildRequest({ digest: digestOf('abc'), nonce })),
      '-text',
    );
    expect(text).toContain('Hash Algorithm: sha256');
    expect(text).toContain('Nonce: 0xFF00000000000001');
    expect(text).toContain('Certificate required: yes');
  });
});

describe('a token of the own authority', () => {
  it('is accepted by openssl ts -verify with the root alone', () => {
    const { reply, checked } = stampOf(note);
    const [data, response] = [file('note', note), file('reply.tsr', reply)];
    expect(openssl('ts', '-verify', '-data', data, '-in', response, '-CAfile', rootPem())).toContain('OK');
    const token = file('token.der', checked.token);
    expect(openssl('ts', '-verify', '-data', data, '-in', token, '-token_in', '-CAfile', rootPem())).toContain('OK');
  });

  it('is accepted with its request, so the nonce came back', () => {
    const [digest, nonce] = [digestOf(note), newNonce()];
    const request = buildRequest({ digest, nonce });
    const [query, response] = [file('q.tsq', request), file('r.tsr', answerRequest(request))];
    expect(openssl('ts', '-verify', '-queryfile', query, '-in', response, '-CAfile', rootPem())).toContain('OK');
    const other = file('other.tsq', buildRequest({ digest, nonce: nonce ^ 1n }));
    expect(tryOpenssl('ts', '-verify', '-queryfile', other, '-in', response, '-CAfile', rootPem())).toMatch(
      /refused.*nonce mismatch/s,
    );
  });

  it('is refused for other data and under another root of the same name', () => {
    const { reply } = stampOf(note);
    const response = file('reply2.tsr', reply);
    const other = file('other', `${note} `);
    expect(tryOpenssl('ts', '-verify', '-data', other, '-in', response, '-CAfile', rootPem())).toMatch(
      /refused.*message imprint mismatch/s,
    );
    const stranger = makeAuthority().match(/-----BEGIN CERTIFICATE-----[^-]+-----END CERTIFICATE-----/g)?.[1] ?? '';
    const strangerPem = file('stranger.pem', stranger);
    const data = file('note2', note);
    expect(tryOpenssl('ts', '-verify', '-data', data, '-in', response, '-CAfile', strangerPem)).toMatch(/refused/);
  });

  it('is read by openssl ts -reply -text: granted, policy, accuracy, name, a time of its own', () => {
    const instant = new Date('2024-02-29T23:59:58.250Z');
    return atTime(instant, async () => {
      const response = file('text.tsr', stampOf(note).reply);
      const text = openssl('ts', '-reply', '-in', response, '-text');
      expect(text).toContain('Status: Granted.');
      expect(text).toContain(`Policy OID: ${oids.ownPolicy}`);
      expect(text).toContain('Time stamp: Feb 29 23:59:58.25 2024 GMT');
      expect(text).toContain('Accuracy: 0x01 seconds, unspecified millis, unspecified micros');
      expect(text).toContain('not independent');
    });
  });

  it('verifies at every time the demo tells of, because its certificates are older', () => {
    return atTime(new Date('2016-01-01T00:00:00.000Z'), async () => {
      const [data, response] = [file('old', note), file('old.tsr', stampOf(note).reply)];
      expect(openssl('ts', '-verify', '-data', data, '-in', response, '-CAfile', rootPem())).toContain('OK');
    });
  });

  it('carries no certificate unless one was asked for', () => {
    const query = path.join(folder, 'nocert.tsq');
    openssl('ts', '-query', '-data', file('nc', note), '-sha256', '-out', query);
    const reply = answerRequest(new Uint8Array(readFileSync(query)));
    const withCertificates = answerRequest(buildRequest({ digest: digestOf(note), nonce: 1n }));
    expect(reply.length).toBeLessThan(withCertificates.length - 700);
    const stamper = file('stamper.pem', ownCertificates().leaf.toString());
    const response = file('nc.tsr', reply);
    const parts = ['ts', '-verify', '-queryfile', query, '-in', response, '-CAfile', rootPem()];
    expect(openssl(...parts, '-untrusted', stamper)).toContain('OK');
  });

  it('answers a request that OpenSSL made, for each digest it takes', () => {
    for (const digest of ['sha256', 'sha384', 'sha512']) {
      const query = path.join(folder, `${digest}.tsq`);
      openssl('ts', '-query', '-data', file('d', note), `-${digest}`, '-cert', '-out', query);
      const response = file(`${digest}.tsr`, answerRequest(new Uint8Array(readFileSync(query))));
      expect(openssl('ts', '-verify', '-queryfile', query, '-in', response, '-CAfile', rootPem())).toContain('OK');
    }
  });

  it('never has the number of another', () => {
    const serials = Array.from({ length: 50 }, () => readToken(stampOf(note).checked.token).serial);
    expect(new Set(serials).size).toBe(50);
  });

  it('is read by the verifier that every reader gets', () => {
    const token = readToken(stampOf(note).checked.token);
    expect(isTokenOf(token, note)).toBe(true);
    expect(isTokenOf(token, `${note} `)).toBe(false);
  });

  it('has certificates whose chain and purpose OpenSSL accepts', () => {
    const stamper = file('leaf.pem', ownCertificates().leaf.toString());
    const parts = ['verify', '-x509_strict', '-purpose', 'timestampsign', '-CAfile', rootPem(), stamper];
    expect(openssl(...parts)).toContain('OK');
  });
});

describe('a reply of somebody else’s authority', () => {
  // OpenSSL plays the authority: RSA, its own configuration, an ESSCertID by the digest named.
  const configuration = `[tsa]
serial=${path.join(folder, 'serial')}
default_policy=1.2.3.4.1
digests=sha256
signer_digest=sha256
[req]
distinguished_name=name
x509_extensions=usage
[name]
[usage]
extendedKeyUsage=critical,timeStamping
keyUsage=critical,digitalSignature
`;
  it.each(['sha1', 'sha256', 'sha384'])('is taken, with its certificate named by %s', (named) => {
    const settings = file('tsa.cnf', configuration.replace('[req]', `ess_cert_id_alg=${named}\n[req]`));
    const [key, certificate] = [path.join(folder, 'tsa.key'), path.join(folder, 'tsa.crt')];
    const subject = ['-subj', '/CN=Another authority', '-days', '2'];
    openssl(
      'req',
      '-x509',
      '-newkey',
      'rsa:2048',
      '-nodes',
      '-config',
      settings,
      ...subject,
      '-keyout',
      key,
      '-out',
      certificate,
    );
    const [digest, nonce] = [digestOf(note), newNonce()];
    const query = file('foreign.tsq', buildRequest({ digest, nonce }));
    const response = path.join(folder, 'foreign.tsr');
    const signer = ['-config', settings, '-section', 'tsa', '-signer', certificate, '-inkey', key];
    openssl('ts', '-reply', '-queryfile', query, ...signer, '-out', response);
    const { genTime, token } = checkReply(new Uint8Array(readFileSync(response)), { digest, nonce, at: now() });
    expect(Math.abs(genTime.getTime() - Date.now())).toBeLessThan(60_000);
    const parts = ['-in', file('foreign.der', token), '-token_in', '-CAfile', certificate];
    expect(openssl('ts', '-verify', '-data', file('foreign', note), ...parts)).toContain('OK');
  });
});

describe('a request that cannot be granted', () => {
  const imprint = (algorithm: string, bytes: number) =>
    sequence(sequence(oid(algorithm), nullValue()), octetString(randomBytes(bytes)));
  const sha256Imprint = imprint(oids.sha256, 32);
  it.each([
    ['an unknown digest', sequence(integer(1), imprint('1.3.14.3.2.26', 20)), 'unrecognized or unsupported algorithm'],
    [
      'a digest of the wrong length',
      sequence(integer(1), imprint(oids.sha256, 31)),
      'the data submitted has the wrong',
    ],
    ['another version', sequence(integer(2), sha256Imprint), 'transaction not permitted or supported'],
    ['a foreign policy', sequence(integer(1), sha256Imprint, oid('1.2.3')), 'the requested TSA policy is not'],
    [
      'an extension',
      sequence(
        integer(1),
        sha256Imprint,
        context(0, sequence(oid('1.2.3'), boolean(false), octetString(Buffer.of(5)))),
      ),
      'the requested extension is not supported',
    ],
    ['bytes that are no request', randomBytes(40), 'the data submitted has the wrong format'],
    [
      'a request with bytes after it',
      Buffer.concat([buildRequest({ digest: digestOf('a') }), Buffer.of(0)]),
      'wrong format',
    ],
    ['nothing', new Uint8Array(), 'wrong format'],
  ])('is rejected by its RFC 3161 reason: %s', (_, request, reason) => {
    const text = openssl('ts', '-reply', '-in', file('bad.tsr', answerRequest(request)), '-text');
    expect(text).toContain('Status: Rejected.');
    expect(text).toContain(reason);
    expect(() => checkReply(answerRequest(request), { digest: digestOf('a'), nonce: 1n, at: now() })).toThrow(
      'The authority refused with status 2',
    );
  });
});

describe('a reply that the client must not take', () => {
  const [digest, nonce] = [digestOf(note), newNonce()];
  const reply = answerRequest(buildRequest({ digest, nonce }));
  const changed = (find: string, replacement: string) => {
    const hex = toHex(reply);
    expect(hex.split(find)).toHaveLength(2);
    return fromHex(hex.replace(find, replacement));
  };

  it('stands on other data', () => {
    expect(() => checkReply(reply, { digest: digestOf('else'), nonce, at: now() })).toThrow('stands on other data');
  });

  it('answers another request', () => {
    expect(() => checkReply(reply, { digest, nonce: nonce + 1n, at: now() })).toThrow('its nonce differs');
  });

  it('has no nonce at all', () => {
    const without = answerRequest(buildRequest({ digest }));
    expect(() => checkReply(without, { digest, nonce, at: now() })).toThrow('its nonce differs');
  });

  it.each([
    [60_000, true],
    [60_001, false],
  ])('lies %i ms in the future', async (ahead, isTaken) => {
    const at = new Date('2026-04-18T23:32:05.000Z');
    const early = await atTime(new Date(at.getTime() + ahead), async () =>
      answerRequest(buildRequest({ digest, nonce })),
    );
    const check = () => checkReply(early, { digest, nonce, at });
    if (isTaken) expect(check().genTime.getTime()).toBe(at.getTime() + ahead);
    else expect(check).toThrow('is in the future');
  });

  it('was changed after signing', () => {
    const time = toHex(utf8(new Date().getUTCFullYear().toString()));
    expect(time).toHaveLength(8);
    const genTime = toHex(reply).match(/18[01][0-9a-f]32303[0-9a-f]{3}(?:3[0-9]){10}/)?.[0] ?? '';
    const forged = genTime.replace(/^(.{4})3230/, '$13139');
    expect(() => checkReply(changed(genTime, forged), { digest, nonce, at: now() })).toThrow('something else');
  });

  const purpose = (isCritical: boolean, ...purposes: string[]) =>
    extension(oids.extendedKeyUsage, isCritical, sequence(...purposes.map(oid)));
  const clientAuth = '1.3.6.1.5.5.7.3.2';
  it.each([
    ['for something else', purpose(true, clientAuth)],
    ['for something else too', purpose(true, oids.timeStamping, clientAuth)],
    ['whose purpose is not critical', purpose(false, oids.timeStamping)],
    ['without a purpose', extension('2.5.29.30.1', false, sequence())],
  ])('is signed by a certificate %s', (_, extendedKeyUsage) => {
    const authority = readChain(makeAuthority(extendedKeyUsage));
    const other = answerRequest(buildRequest({ digest, nonce }), authority);
    expect(() => checkReply(other, { digest, nonce, at: now() })).toThrow('not for time stamps alone');
  });

  it('has a signature with one bit turned', () => {
    const bytes = new Uint8Array(reply);
    bytes[bytes.length - 1] = (bytes.at(-1) ?? 0) ^ 1;
    expect(() => checkReply(bytes, { digest, nonce, at: now() })).toThrow('signature does not hold');
  });

  it('lacks the certificate it names', () => {
    const query = path.join(folder, 'bare.tsq');
    openssl('ts', '-query', '-data', file('bare', note), '-sha256', '-out', query);
    const bare = new Uint8Array(readFileSync(query));
    const request = openssl('ts', '-query', '-in', query, '-text');
    const asked = BigInt(/Nonce: (0x[0-9A-F]+)/.exec(request)?.[1] ?? '0');
    expect(() => checkReply(answerRequest(bare), { digest, nonce: asked, at: now() })).toThrow('names is not with it');
  });

  it('is no reply', () => {
    expect(() => checkReply(randomBytes(20), { digest, nonce, at: now() })).toThrow('did not answer with');
    expect(() => checkReply(new Uint8Array(), { digest, nonce, at: now() })).toThrow('did not answer with');
  });
});
