import { expect, it } from 'vitest';
import { keyVerdict } from '@/components/reader/verify/key-verdict';
import { fingerprint, parseVerifierKey } from '@/lib/evidence/checkpoint';
import { attacker, installation, keyOf, signerOf } from '../../evidence/build-record';

const [key, other, older] = [keyOf(installation), keyOf(attacker), keyOf(signerOf(5))];
const described = (verifierKey: string) => ({
  verifierKey,
  fingerprint: fingerprint(parseVerifierKey(verifierKey).publicKey),
});
const used = (verifierKey: string, source: 'reader' | 'file') => ({ ...described(verifierKey), name: 'a', source });

it('a key that the installation publishes raises no alarm, and is said to prove nothing by that alone', () => {
  const { alarm, rows } = keyVerdict({ used: used(key, 'file'), fileKeys: [key], published: [described(key)] });
  expect(alarm).toBeNull();
  expect(rows.map(({ words }) => words).join(' ')).toMatch(
    /Anybody can make.*None was typed.*that alone proves nothing/s,
  );
});

it('a key that the installation does not publish is said first', () => {
  const { alarm } = keyVerdict({ used: used(other, 'file'), fileKeys: [other, key], published: [described(key)] });
  expect(alarm?.title).toBe('This file was not signed with a key of this installation');
});

it('a typed key that fits raises no alarm wherever the record comes from', () => {
  const { alarm, rows } = keyVerdict({ used: used(other, 'reader'), fileKeys: [other], published: [described(key)] });
  expect(alarm).toBeNull();
  expect(rows[2]).toMatchObject({ words: 'It does not publish this key.', tone: 'warn' });
});

it.each([
  [[other], 1],
  [[other, key], 2],
])('a typed key that is not the file’s is said first, also if the file lists it (%#)', (fileKeys, sentences) => {
  const { alarm } = keyVerdict({ used: used(key, 'reader'), fileKeys, published: [described(key)] });
  expect(alarm?.title).toBe('This file was not signed with your key');
  expect(alarm?.sentences).toHaveLength(sentences);
});

it('both keys of an installation that changed its key are said to be published by it', () => {
  const published = [described(key), described(older)];
  const { alarm } = keyVerdict({ used: used(older, 'reader'), fileKeys: [key, older], published });
  expect(alarm?.sentences.at(-1)).toContain('publishes both keys');
});

it.each(['not-asked', 'not-fetched'] as const)('nothing is concluded from keys that were %s', (published) => {
  expect(keyVerdict({ used: used(other, 'file'), fileKeys: [other], published }).alarm).toBeNull();
});

it('a file whose first key cannot be read has no key', () => {
  expect(keyVerdict({ used: null, fileKeys: ['a+b+c'], published: 'not-asked' }).fileKey).toBeNull();
});
