import { execFile } from 'node:child_process';
import { createPublicKey, verify as verifyWithOpenssl } from 'node:crypto';
import { copyFile, mkdir, mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { promisify } from 'node:util';
import { PDFDocument } from 'pdf-lib';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { joinBytes, toBase64, toHex } from '@/lib/evidence/bytes';
import { fingerprint, parseNote, parseVerifierKey, signNote } from '@/lib/evidence/checkpoint';
import type { Finding } from '@/lib/evidence/finding';
import { sha256Hex } from '@/lib/evidence/hash';
import { isTokenOf, readToken } from '@/lib/evidence/token';
import { buildPage, buildVerify, verifyFile, verifyPageFile } from '@/scripts/build-verify';
import {
  attacker, buildRecord, givenFiles, installation, keyOf, signedText, unsignedBundle,
} from '../unit/evidence/build-record'; // prettier-ignore
import { makeOpensslAuthority, Openssl, opensslToken } from './openssl-authority';

const run = promisify(execFile);
const key = keyOf(installation);
const record = buildRecord();
const text = signedText(unsignedBundle(record));
const note = record.machine.seals[0] ?? '';

let folder: string;
const at = (name: string) => path.join(folder, name);
beforeAll(async () => {
  folder = await mkdtemp(path.join(tmpdir(), 'verify-'));
  // Alone in a folder, so that nothing beside it can help.
  await copyFile(verifyFile, at('verify.mjs'));
  await mkdir(at('files'));
  for (const file of givenFiles) await writeFile(path.join(folder, 'files', file.name), file.bytes);
  await writeFile(at('record.json'), text);
  await writeFile(at('changed.json'), text.replace('Warranty claim', 'Warranty cla1m'));
  await writeFile(at('half.json'), text.slice(0, 100));
  await writeFile(at('older.note'), note);
  const document = await PDFDocument.create();
  document.addPage();
  await document.attach(Buffer.from(text), 'record.json');
  for (const file of givenFiles) await document.attach(file.bytes, file.name);
  await writeFile(at('packet.pdf'), await document.save());
});
afterAll(() => rm(folder, { recursive: true, force: true }));

async function verify(...given: string[]): Promise<{ code: number; stdout: string; stderr: string }> {
  try {
    return { code: 0, ...(await run(process.execPath, [at('verify.mjs'), ...given], { cwd: folder })) };
  } catch (error) {
    const { code, stdout, stderr } = error as { code: number; stdout: string; stderr: string };
    return { code, stdout, stderr };
  }
}
const finding = async (...given: string[]): Promise<Finding> =>
  JSON.parse((await verify(...given, '--json')).stdout) as Finding;

it('the committed verifier is what its sources make, byte for byte', async () => {
  const built = await buildVerify();
  // Not compared as texts: a difference in a megabyte of code is nothing to print.
  expect(built === (await readFile(verifyFile, 'utf8')), 'run scripts/build-verify.ts and commit verify.mjs').toBe(
    true,
  );
  expect(built).not.toContain(path.dirname(path.dirname(verifyFile)) + path.sep);
});

it('the committed verify.html is what its sources make, byte for byte', async () => {
  const built = await buildPage();
  expect(built === (await readFile(verifyPageFile, 'utf8')), 'run npm run build:verify and commit verify.html').toBe(
    true,
  );
  expect(built).not.toContain(path.dirname(path.dirname(verifyFile)) + path.sep);
});

describe('the command', () => {
  it('exits with 0 for an unchanged record and says what that shows', async () => {
    const { code, stdout, stderr } = await verify('record.json', '--key', key, '--files', 'files');
    expect([code, stderr]).toEqual([0, '']);
    expect(stdout).toMatch(/^UNCHANGED {2}record\.json\n/);
    expect(stdout).toContain('6 of 6 entries opened');
    expect(stdout).toContain('Not shown: that a statement was true');
  });

  it('takes a fingerprint, as it stands in a packet, for the key', async () => {
    const { code, stdout } = await verify('record.json', '--key', fingerprint(parseVerifierKey(key).publicKey));
    expect(code).toBe(0);
    expect(stdout).toContain('Checked with the key you gave');
  });

  it('takes the record and the files out of a packet', async () => {
    const found = await finding('packet.pdf', '--key', key);
    expect(found).toMatchObject({ outcome: 'unchanged', alterations: [] });
    expect(found.remarks.map((remark) => remark.code)).toEqual([
      'not-time-stamped',
      'not-time-stamped',
      'pages-not-checked',
    ]);
  });

  it('exits with 1 for an altered record, and names what is altered', async () => {
    const { code, stdout } = await verify('changed.json', '--key', key);
    expect(code).toBe(1);
    expect(stdout).toContain('ALTERED');
    expect(stdout).toContain('Something in this file was changed');
    expect((await verify('record.json', '--key', keyOf(attacker))).code).toBe(1);
    await writeFile(path.join(folder, 'files', 'stray.txt'), 'stray');
    expect(await finding('record.json', '--key', key, '--files', 'files')).toMatchObject({
      alterations: [{ code: 'file-unbound' }],
    });
    await rm(path.join(folder, 'files', 'stray.txt'));
  });

  it('compares with an older file', async () => {
    expect(await finding('record.json', '--key', key, '--against', 'older.note')).toMatchObject({
      against: { result: 'consistent' },
    });
    const forked = signNote(parseNote(note).text.replace(/\n1\n.*\n/, `\n1\n${'A'.repeat(43)}=\n`), installation);
    await writeFile(at('forked.note'), forked);
    expect((await verify('record.json', '--key', key, '--against', 'forked.note')).code).toBe(1);
  });

  it.each([
    [['half.json'], 'UNREADABLE'],
    [['verify.mjs'], 'UNREADABLE'],
    [['nowhere.json'], 'cannot be opened: is the name right?'],
    [['record.json', '--key', key.slice(0, -2)], 'Nothing was checked'],
    [['record.json', '--key', 'ab'.repeat(32)], 'signed with another key than yours'],
    [[], 'node scripts/verify.mjs FILE'],
    [['record.json', 'record.json'], 'node scripts/verify.mjs FILE'],
    [['record.json', '--wrong'], 'node scripts/verify.mjs FILE'],
    [['record.json', '--against', 'nowhere.json'], 'The older file could not be read'],
  ])('exits with 2 for %j', async (given, expected) => {
    const { code, stdout, stderr } = await verify(...given);
    expect(code).toBe(2);
    expect(stdout + stderr).toContain(expected);
  });

  it('prints no character that could move the cursor of a terminal', async () => {
    const purpose = 'claim \u001b[2J\u202e';
    await writeFile(at('hostile.json'), signedText(unsignedBundle(record, { purpose })));
    for (const format of [[], ['--json']]) {
      const { stdout } = await verify('hostile.json', ...format);
      expect(stdout).toContain('\\u001b[2J\\u202e');
      expect(stdout).not.toMatch(/[\u001b\u202e]/);
    }
  });
});

describe('openssl agrees', () => {
  // The fixed beginning of an Ed25519 public key in DER, RFC 8410 §4.
  const spkiPrefix = Uint8Array.from([0x30, 0x2a, 0x30, 0x05, 0x06, 0x03, 0x2b, 0x65, 0x70, 0x03, 0x21, 0x00]);

  it('that a checkpoint is signed, and that a changed one is not', async () => {
    const parsed = parseNote(note);
    const der = Buffer.from(joinBytes(spkiPrefix, parseVerifierKey(key).publicKey));
    const publicKey = createPublicKey({ key: der, format: 'der', type: 'spki' });
    await writeFile(at('key.pem'), publicKey.export({ format: 'pem', type: 'spki' }));
    await writeFile(at('checkpoint.txt'), parsed.text);
    await writeFile(at('changed.txt'), parsed.text.replace('\n1\n', '\n2\n'));
    await writeFile(at('signature.bin'), parsed.signature);
    const check = (file: string) =>
      run('openssl', [
        'pkeyutl',
        '-verify',
        '-pubin',
        '-inkey',
        at('key.pem'),
        '-rawin',
        '-in',
        at(file),
        '-sigfile',
        at('signature.bin'),
      ]);
    expect((await check('checkpoint.txt')).stdout).toContain('Signature Verified Successfully');
    await expect(check('changed.txt')).rejects.toThrow();
    expect(verifyWithOpenssl(null, Buffer.from(parsed.text), publicKey, parsed.signature)).toBe(true);
  });

  it('on the hash of a signed checkpoint', async () => {
    const { stdout } = await run('openssl', ['dgst', '-sha256', '-r', at('older.note')]);
    expect(stdout.slice(0, 64)).toBe(sha256Hex(Buffer.from(note)));
  });

  it('on the fingerprint of a key', async () => {
    const { stdout } = await verify('record.json', '--key', key);
    await writeFile(at('public.bin'), parseVerifierKey(key).publicKey);
    const digest = (await run('openssl', ['dgst', '-sha256', '-r', at('public.bin')])).stdout.slice(0, 64);
    expect(stdout).toContain(digest.match(/.{4}/g)?.join(' '));
  });
});

describe('a time stamp that openssl made over a checkpoint', () => {
  const openssl = new Openssl();
  let der: Uint8Array;
  beforeAll(async () => {
    makeOpensslAuthority(openssl, 'P-256');
    der = opensslToken(openssl, note);
    const logs = [record.machine.toLog(), record.shelf.toLog()];
    logs[0]?.entries[0]?.seal.tokens.push(toBase64(der));
    await writeFile(at('stamped.json'), signedText(unsignedBundle(record, { logs })));
    await copyFile(openssl.at('root.pem'), at('roots.pem'));
  });
  afterAll(() => openssl.remove());

  it('is read as openssl prints it', () => {
    const token = readToken(der);
    const shown = openssl.run('ts', '-reply', '-in', 'token.der', '-token_in', '-token_out', '-text');
    expect(token).toMatchObject({ policy: '1.2.3.4.1', imprintAlgorithm: '2.16.840.1.101.3.4.2.1' });
    expect(toHex(token.imprint)).toBe(sha256Hex(Buffer.from(note)));
    expect(isTokenOf(token, note)).toBe(true);
    expect(shown).toContain(`Serial number: 0x${token.serial.toUpperCase()}`);
    const printed = /Time stamp: (.*)/.exec(shown)?.[1] ?? '';
    expect(new Date(printed).toISOString()).toBe(token.genTime);
  });

  it('proves nothing without a root, and the command says how to bring one', async () => {
    const found = await finding('stamped.json', '--key', key);
    const { genTime, serial } = readToken(der);
    expect(found.outcome).toBe('unchanged');
    expect(found.entries[0]).toMatchObject({ proven: null, stampedBy: [{ genTime, serial, policy: '1.2.3.4.1', size: 1 }] });
    expect(found.entries[0]?.stampedBy).toMatchObject([{ sha256: sha256Hex(der), signer: 'Quill stamps', trust: 'unknown' }]);
    const { stdout } = await verify('stamped.json', '--key', key);
    expect(stdout).toContain('--tsa-roots PEM');
    expect(stdout).toContain(`not proven (a time stamp says ${genTime})`);
    expect(stdout).toContain('1 by “Quill stamps”: under no root that you brought');
  }); // prettier-ignore

  it('proves by the root that is given, which the report names with the fingerprint openssl prints', async () => {
    const { code, stdout } = await verify('stamped.json', '--key', key, '--tsa-roots', 'roots.pem');
    expect(code).toBe(0);
    expect(stdout).toMatch(
      new RegExp(`, sealed 2026-01-01T08:01:00.000Z, proven to exist by ${readToken(der).genTime}`),
    );
    expect(stdout).toContain('1 by “Quill stamps”: independent, under your root “Quill root”');
    const printed = openssl.run('x509', '-in', 'root.pem', '-noout', '-fingerprint', '-sha256');
    const digits = (printed.split('=')[1] ?? '').trim().replaceAll(':', '').toLowerCase();
    expect(stdout).toContain(`root fingerprint ${digits.match(/.{4}/g)?.join(' ')}`);
  });

  it('is not checked at all with a roots file that cannot be used', async () => {
    await writeFile(at('empty.pem'), 'none');
    for (const [file, sentence] of [['empty.pem', 'holds no certificate'], ['missing.pem', 'cannot be opened']] as const) {
      const { code, stdout, stderr } = await verify('stamped.json', '--key', key, '--tsa-roots', file);
      expect([code, stdout]).toEqual([2, '']);
      expect(stderr).toContain(sentence);
    }
  }); // prettier-ignore
});
