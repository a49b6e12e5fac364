import { execFileSync, spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { mkdtempSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { packetCertificate, packetCertificateFile } from '@/lib/ports/packet-certificate';
import { packetFile, resumePackets } from '@/lib/services/build-packet';
import { timeStampRoot } from '@/lib/services/answer-time-stamp';
import { packetRoot } from '@/lib/services/packet-signing';
import { queuePacket } from '@/lib/services/request-packet';
import { riderWithMachine } from '../db/services/garage-story';
import { holeIn, withContents } from '../setup/signed-packet';
import { useTestDatabase } from '../setup/test-database';

// Judges: poppler's pdfsig (a PDF signature as PDF readers see it, with NSS behind it), OpenSSL 3 (`cms` with the CAdES
// checks of ETSI EN 319 122-1, `verify`, `ts`), qpdf, mupdf, and the second verifier with its own reading of the format.
useTestDatabase();

let folder = '';
let file = '';
let number = '';
let packet: Buffer;
const at = (name: string, content?: string | Uint8Array) => {
  const where = path.join(folder, name);
  if (content !== undefined) writeFileSync(where, content);
  return where;
};
const tool = (name: string, ...given: string[]) => {
  const { status, stdout, stderr } = spawnSync(name, given, { encoding: 'utf8' });
  return { status, said: `${stdout}${stderr}` };
};
const said = (name: string, ...given: string[]) => execFileSync(name, given, { encoding: 'utf8', stdio: 'pipe' });

beforeAll(async () => {
  folder = mkdtempSync(path.join(tmpdir(), 'witnessmark-signature-'));
  const { person, machine } = await riderWithMachine();
  ({ number } = await queuePacket({ machineId: machine, by: person.id, purpose: 'a warranty claim' }));
  await resumePackets();
  file = packetFile(number);
  packet = readFileSync(file);
  const { start, end } = holeIn(packet);
  const value = Buffer.from(packet.toString('latin1', start + 1, end - 1), 'hex');
  at('signature.der', value.subarray(0, 4 + value.readUInt16BE(2)));
  at('signed', Buffer.concat([packet.subarray(0, start), packet.subarray(end)]));
  at('root.pem', packetRoot());
});
afterAll(() => rmSync(folder, { recursive: true }));

describe('a packet, as it was built', () => {
  it('has one signature over the whole file that pdfsig finds valid, with the reason and the time of the cover', () => {
    const text = said('pdfsig', file);
    expect(text.match(/Signature #/g)).toHaveLength(1);
    expect(text).toContain('Signature Validation: Signature is Valid.');
    expect(text).toContain('Total document signed');
    expect(text).toContain('Signature Type: ETSI.CAdES.detached');
    expect(text).toContain('Signing Hash Algorithm: SHA-256');
    expect(text).toContain('Signer Certificate Common Name: demo.example packets');
    // A stranger's word for it, until the installation's root is trusted; the page says so.
    expect(text).toContain("Certificate issuer isn't Trusted");
    const dictionary = packet.toString('latin1');
    expect(dictionary).toContain(`/Reason <FEFF${Buffer.from(`Packet ${number}`, 'utf16le').swap16().toString('hex').toUpperCase()}>`); // prettier-ignore
    const madeAt = /\/M \(D:(\d+)Z\)/.exec(dictionary)?.[1];
    expect(madeAt).toBe(said('pdfinfo', '-isodates', file).match(/CreationDate:\s+(\S+)/)?.[1]?.replace(/[-:T]|Z|\+.*/g, '')); // prettier-ignore
    const made = JSON.parse(record(file)).madeAt.slice(0, 19).replace(/[-:T]/g, '');
    expect(madeAt).toBe(made);
  });

  it('is signed for openssl too, CAdES rules included, under the root that this installation publishes', () => {
    const parts = ['-inform', 'DER', '-in', at('signature.der'), '-content', at('signed'), '-CAfile', at('root.pem')];
    const verify = ['cms', '-verify', '-binary', '-cades', ...parts, '-signer', at('leaf.pem'), '-out', '/dev/null'];
    expect(tool('openssl', ...verify)).toMatchObject({ status: 0 });
    expect(said('openssl', 'verify', '-x509_strict', '-CAfile', at('root.pem'), at('leaf.pem'))).toContain('OK');
    const der = said('openssl', 'x509', '-in', at('leaf.pem'), '-noout', '-fingerprint', '-sha256');
    const fingerprint = der.split('=')[1]?.replaceAll(':', '').trim().toLowerCase();
    expect(fingerprint).toBe(JSON.parse(record(file)).packetCertificate);
    expect(said('pdftotext', file, '-').replace(/\s/g, '')).toContain(fingerprint);
    at('signed-otherwise', readFileSync(at('signed')).fill('x', 2000, 2001));
    expect(tool('openssl', ...verify.map((part) => (part === at('signed') ? at('signed-otherwise') : part))).status).not.toBe(0); // prettier-ignore
  });

  it('has no signing time among its attributes, since PAdES wants it in the dictionary (ETSI EN 319 142-1)', () => {
    const shown = said('openssl', 'cms', '-cmsout', '-print', '-noout', '-inform', 'DER', '-in', at('signature.der'));
    expect(shown).not.toContain('signingTime');
    expect(shown).toContain('id-smime-aa-signingCertificateV2');
  });

  it('carries a time stamp over the value of its signature, which openssl accepts', () => {
    const shown = said('openssl', 'asn1parse', '-inform', 'DER', '-in', at('signature.der'));
    const lines = shown.split('\n');
    const place = (line: string) => Number(/^\s*(\d+):/.exec(line)?.[1]);
    const lengths = (line: string) => Number(/hl=(\d+)/.exec(line)?.[1]) + Number(/ l=\s*(\d+)/.exec(line)?.[1]);
    const named = lines.findIndex((line) => line.includes('id-smime-aa-timeStampToken'));
    const tokenLine = lines[named + 2] ?? '';
    const der = readFileSync(at('signature.der'));
    at('token', der.subarray(place(tokenLine), place(tokenLine) + lengths(tokenLine)));
    // The signature's value is the octet string before the attributes that nothing protects.
    const valueLine = lines.slice(0, named).findLast((line) => line.includes('OCTET STRING')) ?? '';
    const header = Number(/hl=(\d+)/.exec(valueLine)?.[1]);
    at('value', der.subarray(place(valueLine) + header, place(valueLine) + lengths(valueLine)));
    at('stamps.pem', timeStampRoot());
    const parts = ['ts', '-verify', '-data', at('value'), '-in', at('token'), '-token_in', '-CAfile', at('stamps.pem')];
    expect(tool('openssl', ...parts).said).toContain('Verification: OK');
  });

  it('stays whole for qpdf, silent in mupdf, and tagged, with the signature field in the structure', () => {
    expect(said('qpdf', '--check', file)).toContain('No syntax or stream encoding errors found');
    const drawn = tool('mutool', 'draw', '-o', at('page-%d.png'), '-r', '30', file).said;
    expect(drawn.split('\n').filter((line) => !/^(page .*|warning: ICC support is not available|)$/.test(line))).toEqual([]); // prettier-ignore
    expect(said('pdfinfo', '-struct', file)).toMatch(/^\s*Form/m);
    // ISO 19005-3, 6.3.2: an annotation is printed (4) and neither hidden (2) nor left out of view (32).
    const flags = Number(/\/F (\d+)\n/.exec(packet.toString('latin1'))?.[1]);
    expect(flags & 0b100110).toBe(4);
  });
});

function record(packetPath: string): string {
  const out = mkdtempSync(path.join(folder, 'record-'));
  said('pdfdetach', '-saveall', '-o', out, packetPath);
  return readFileSync(path.join(out, 'record.json'), 'utf8');
}

function judge(bytes: Uint8Array): { own: number | null; independent: number | null; said: string } {
  const where = at('judged.pdf', bytes);
  const own = tool('node', 'scripts/verify.mjs', where);
  const independent = tool('python3', 'tests/outside/independent_verifier.py', where);
  return { own: own.status, independent: independent.status, said: own.said + independent.said };
}
const bothAltered = { own: 1, independent: 1, said: expect.stringMatching(/pages-changed[^]*\npages: /) };

describe('two verifiers that share no code', () => {
  it('both find the packet unchanged', () => {
    expect(judge(packet)).toMatchObject({ own: 0, independent: 0 });
  });

  it('both find a changed page altered', () => {
    const changed = Buffer.from(packet);
    changed.write('1', packet.indexOf('/MediaBox [ 0 0 595.28') + '/MediaBox [ 0 0 '.length, 'latin1');
    expect(judge(changed)).toMatchObject(bothAltered);
    expect(said('pdfsig', at('judged.pdf'))).toContain('Digest Mismatch');
  });

  it('both find a stripped signature altered', () => {
    const [start, { end }] = [packet.indexOf('/Type /Sig\n'), holeIn(packet)];
    const stripped = Buffer.concat([packet.subarray(0, start), Buffer.alloc(end - start, ' '), packet.subarray(end)]);
    expect(judge(stripped)).toMatchObject(bothAltered);
  });

  it('both find bytes behind the signature altered, and a signature taken from elsewhere', () => {
    const der = readFileSync(at('signature.der'));
    expect(judge(withContents(packet, der))).toMatchObject({ own: 0, independent: 0 });
    expect(judge(withContents(packet, der, '0001'))).toMatchObject(bothAltered);
    // Signed over other bytes by openssl, with a certificate of the same name.
    const made = ['req', '-x509', '-newkey', 'ec', '-pkeyopt', 'ec_paramgen_curve:P-256', '-nodes', '-days', '2'];
    said(
      'openssl',
      ...made,
      '-subj',
      '/CN=demo.example packets',
      '-keyout',
      at('forger.key'),
      '-out',
      at('forger.pem'),
    );
    const sign = ['cms', '-sign', '-binary', '-cades', '-md', 'sha256', '-outform', 'DER', '-in', at('signed')];
    said('openssl', ...sign, '-signer', at('forger.pem'), '-inkey', at('forger.key'), '-out', at('forged.der'));
    expect(judge(withContents(packet, readFileSync(at('forged.der'))))).toMatchObject(bothAltered);
    expect(said('pdfsig', at('judged.pdf'))).toContain('Signature is Valid');
  });
});

it('the key is its owner’s alone, and another file in its place signs with another certificate from then on', async () => {
  expect(statSync(packetCertificateFile()).mode & 0o777).toBe(0o600);
  const before = packetCertificate().sha256;
  rmSync(packetCertificateFile());
  const { person, machine } = await riderWithMachine();
  const later = await queuePacket({ machineId: machine, by: person.id, purpose: '' });
  await resumePackets();
  const bound = JSON.parse(record(packetFile(later.number))).packetCertificate as string;
  expect(bound).not.toBe(before);
  expect(bound).toBe(createHash('sha256').update(packetCertificate().leaf.raw).digest('hex'));
  expect(judge(readFileSync(packetFile(later.number)))).toMatchObject({ own: 0, independent: 0 });
  expect(judge(packet)).toMatchObject({ own: 0, independent: 0 });
});
