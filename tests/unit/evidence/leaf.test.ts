import { describe, expect, it } from 'vitest';
import { canonicalJson } from '@/lib/evidence/canonical';
import { openDisclosure } from '@/lib/evidence/disclosure';
import type { Leaf } from '@/lib/evidence/format';
import { buildLeaf, isReference, leafHash, parseLeaf } from '@/lib/evidence/leaf';

const log = '6f1c2a34-0000-4000-8000-000000000001';
const salt = 'AAAAAAAAAAAAAAAAAAAAAA';
const hash = '6e340b9cffb37a989ca544e6bb780a2c78901d3fb33738768511a30617afa01d';
const built = buildLeaf({
  log, seq: 3, previous: hash, kind: 'strike', sealedAt: '2026-04-18T23:32:05.120Z', refersTo: { seq: 1, leafHash: hash },
  parts: [{ name: 'body', value: { reason: 'Wrong machine.' }, salt }, { name: 'author', value: { name: 'Joost' }, salt }],
}); // prettier-ignore

it('hashes nothing as RFC 6962’s first test leaf', () => {
  expect(leafHash('')).toBe(hash);
});

it('is its own canonical form, its parts in order, each with the digest of its disclosure', () => {
  expect(canonicalJson(built.leaf)).toBe(built.text);
  expect(parseLeaf(built.text)).toEqual(built.leaf);
  expect(built.hash).toBe(leafHash(built.text));
  expect(built.leaf.parts.map(({ name }) => name)).toEqual(['author', 'body']);
  expect(built.disclosures.map(({ text }) => openDisclosure(text).digest)).toEqual(
    built.leaf.parts.map(({ digest }) => digest),
  );
});

describe('a leaf is refused', () => {
  const digest = built.leaf.parts[0]?.digest;
  const cases: [string, Record<string, unknown>][] = [
    ['with a member more', { note: '' }],
    ['in another format', { format: 'witnessmark/leaf/2' }],
    ['with a log in capitals', { log: log.toUpperCase() }],
    ['with a negative number', { seq: -1 }],
    ['with a fraction for its number', { seq: 3.5 }],
    ['with a number over 2⁵³−1', { seq: 2 ** 53 }],
    ['as entry 0 with something before it', { seq: 0, kind: 'opening', refersTo: null }],
    ['as entry 0 that is no opening', { seq: 0, previous: null, refersTo: null }],
    ['as a later opening', { kind: 'opening' }],
    ['without what was before it', { previous: null }],
    ['of an unknown kind', { kind: 'recall' }],
    ['sealed without milliseconds', { sealedAt: '2026-04-18T23:32:05Z' }],
    ['sealed on a day that is not', { sealedAt: '2026-02-29T00:00:00.000Z' }],
    ['sealed elsewhere than in UTC', { sealedAt: '2026-04-18T23:32:05.120+00:00' }],
    ['referring to itself', { refersTo: { seq: 3, leafHash: hash } }],
    ['referring to nothing in particular', { refersTo: {} }],
    ['with parts out of order', { parts: [...built.leaf.parts].reverse() }],
    ['with a part twice', { parts: [built.leaf.parts[0], built.leaf.parts[0]] }],
    ['with an unknown part', { parts: [{ name: 'diary', digest }] }],
    ['with a short digest', { parts: [{ name: 'body', digest: digest?.slice(1) }] }],
    ['with a member more in a part', { parts: [{ name: 'body', digest, note: '' }] }],
  ];
  it.each(cases)('%s', (_, change) => {
    expect(() => parseLeaf(canonicalJson({ ...built.leaf, ...change }))).toThrow(
      expect.objectContaining({ code: 'malformed' }),
    );
  });

  it('without one of its members', () => {
    for (const name of Object.keys(built.leaf)) {
      const rest = Object.fromEntries(Object.entries(built.leaf).filter(([other]) => other !== name));
      expect(() => parseLeaf(canonicalJson(rest)), name).toThrow('eight members');
    }
  });

  it('in another spelling', () => {
    expect(() => parseLeaf(`${built.text} `)).toThrow(expect.objectContaining({ code: 'not-canonical' }));
  });
});

it('refers to the entry just before it, but not to itself', () => {
  const at = (seq: number) => canonicalJson({ ...built.leaf, refersTo: { seq, leafHash: hash } } satisfies Leaf);
  expect(() => parseLeaf(at(2))).not.toThrow();
  expect(() => parseLeaf(at(3))).toThrow();
  expect(() => parseLeaf(at(4))).toThrow();
  expect(isReference({ seq: 0, leafHash: hash })).toBe(true);
  expect(isReference({ seq: 0, leafHash: hash, log })).toBe(false);
});
