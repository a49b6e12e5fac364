import fc from 'fast-check';
import { ed25519 } from '@noble/curves/ed25519.js';
import { describe, expect, it } from 'vitest';
import { fromHex, toBase64, toHex, utf8 } from '@/lib/evidence/bytes';
import {
  checkpointText, fingerprint, parseCheckpoint, parseNote, parseVerifierKey, signNote, verifierKey, verifyNote,
} from '@/lib/evidence/checkpoint'; // prettier-ignore
import { sha256Hex } from '@/lib/evidence/hash';
import { emptyRoot } from '@/lib/evidence/merkle';

// RFC 8032 §7.1, test 2.
const seed = fromHex('4ccd089b28ff96da9db6c346ec114e0f5b8a319f35aba624da8cf6ed4fb8a6fb');
const publicKey = fromHex('3d4017c3e843895a92b70aa74d1b7ebc9c982ccf2ec4968cc0cd55f12af4660c');
const signature =
  '92a009a9f0d4cab8720e820b5f642540a2b27b5416503f8fb3762223ebdb69da085ac1e43e15996e458f3613d0f11d8c387b2eaeb4302aeeb00d291612bb0c00';
const name = 'records.garage.example';
const key = verifierKey(name, publicKey);
const log = '6f1c2a34-0000-4000-8000-000000000001';

describe('signatures', () => {
  it('are those of RFC 8032', () => {
    expect(toHex(ed25519.getPublicKey(seed))).toBe(toHex(publicKey));
    expect(toHex(ed25519.sign(utf8('r'), seed))).toBe(signature);
  });

  it('cover the text with its newline, and nothing that was changed later', () => {
    const note = signNote('r\n', { name, privateKeySeed: seed });
    const parsed = parseNote(note);
    expect(parsed).toMatchObject({ text: 'r\n', keyName: name, keyHash: parseVerifierKey(key).keyHash });
    expect(ed25519.verify(parsed.signature, utf8('r\n'), publicKey)).toBe(true);
    expect(verifyNote(note, key)).toBe(true);
    for (let index = 0; index < note.length; index += 1) {
      const character = note[index] === 'a' ? 'b' : 'a';
      expect(verifyNote(note.slice(0, index) + character + note.slice(index + 1), key), `character ${index}`).toBe(
        false,
      );
    }
  });

  it('are not accepted from another key of the same name', () => {
    const other = verifierKey(name, ed25519.getPublicKey(new Uint8Array(32).fill(7)));
    expect(verifyNote(signNote('r\n', { name, privateKeySeed: seed }), other)).toBe(false);
  });

  it('are not made of a text without its newline, or by a key without a proper name', () => {
    expect(() => signNote('r', { name, privateKeySeed: seed })).toThrow('newline');
    expect(() => signNote('r\n', { name: 'Records', privateKeySeed: seed })).toThrow('Records');
  });
});

describe('a signed note', () => {
  const good = signNote('r\n', { name, privateKeySeed: seed });
  it.each([
    ['nothing', ''],
    ['no empty line', good.replace('\n\n', '\n')],
    ['two signature lines', good + good.slice(good.indexOf('—'))],
    ['no last newline', good.slice(0, -1)],
    ['a hyphen for the dash', good.replace('—', '-')],
    ['a shorter signature', `r\n\n— ${name} ${toBase64(new Uint8Array(67))}\n`],
    ['a longer signature', `r\n\n— ${name} ${toBase64(new Uint8Array(69))}\n`],
    ['a key name with capitals', good.replace(name, 'Records')],
  ])('is not one with %s', (_, note) => {
    expect(() => parseNote(note)).toThrow(expect.objectContaining({ code: 'malformed' }));
    expect(verifyNote(note, key)).toBe(false);
  });
});

describe('a verifier key', () => {
  it('comes apart as it was put together', () => {
    expect(parseVerifierKey(key)).toEqual({ name, keyHash: key.split('+')[1], publicKey });
    fc.assert(
      fc.property(fc.uint8Array({ minLength: 32, maxLength: 32 }), (bytes) => {
        expect(toHex(parseVerifierKey(verifierKey('a', bytes)).publicKey)).toBe(toHex(bytes));
      }),
    );
  });

  it.each(['', 'a', `${name}+00000000+${key.split('+')[2]}`, key + ' ', key.toUpperCase(), `x${key}`])(
    'is not %j',
    (text) => {
      expect(() => parseVerifierKey(text)).toThrow(expect.objectContaining({ code: 'malformed' }));
    },
  );

  it('has a fingerprint of sixteen groups of four', () => {
    expect(fingerprint(publicKey)).toMatch(/^([0-9a-f]{4} ){15}[0-9a-f]{4}$/);
    expect(fingerprint(publicKey).replaceAll(' ', '')).toBe(sha256Hex(publicKey));
  });

  it('is not made of 31 or 33 bytes', () => {
    expect(() => verifierKey(name, new Uint8Array(31))).toThrow('32 bytes');
    expect(() => verifierKey(name, new Uint8Array(33))).toThrow('32 bytes');
  });
});

describe('a checkpoint', () => {
  it('is three lines and comes back the same', () => {
    const text = checkpointText({ origin: name, log, size: 12, root: emptyRoot });
    expect(text).toBe(`${name}/${log}\n12\n47DEQpj8HBSa+/TImW+5JCeuQeRkm5NMpJWZG3hSuFU=\n`);
    expect(parseCheckpoint(text)).toEqual({ origin: name, log, size: 12, root: emptyRoot });
  });

  it.each([
    ['012', 'a leading zero'],
    ['-1', 'a sign'],
    ['1.0', 'a fraction'],
    ['', 'no size'],
    ['9007199254740992', 'a size over 2⁵³−1'],
  ])('is not one with size %j: %s', (size) => {
    const text = checkpointText({ origin: name, log, size: 12, root: emptyRoot }).replace('\n12\n', `\n${size}\n`);
    expect(() => parseCheckpoint(text)).toThrow(expect.objectContaining({ code: 'malformed' }));
  });

  it('is not one with a fourth line or a bare origin', () => {
    const text = checkpointText({ origin: name, log, size: 12, root: emptyRoot });
    expect(() => parseCheckpoint(`${text}more\n`)).toThrow();
    expect(() => parseCheckpoint(text.replace(`/${log}`, ''))).toThrow();
    expect(() => checkpointText({ origin: 'witnessmark/bundle', log, size: 0, root: emptyRoot })).toThrow();
  });
});
