import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { fromHex, joinBytes } from '@/lib/evidence/bytes';
import { sha256Hex } from '@/lib/evidence/hash';
import { leafHash } from '@/lib/evidence/leaf';
import {
  CompactTree, consistencyProof, emptyRoot, inclusionProof, rootOf, verifyConsistency, verifyInclusion,
} from '@/lib/evidence/merkle'; // prettier-ignore

// Leaves, roots, nodes and proofs as in the tests of transparency-dev/merkle (RFC 6962 §2.1, RFC 9162 §2.1).
const leaves = ['', '00', '10', '2021', '3031', '40414243', '5051525354555657', '606162636465666768696a6b6c6d6e6f'].map(
  (hex) => sha256Hex(joinBytes(new Uint8Array([0]), fromHex(hex))),
);
const roots = [
  'e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855',
  '6e340b9cffb37a989ca544e6bb780a2c78901d3fb33738768511a30617afa01d',
  'fac54203e7cc696cf0dfcb42c92a1d9dbaf70ad9e621f4bd8d98662f00e3c125',
  'aeb6bcfe274b70a14fb067a5e5578264db0fa9b51af5e0ba159158f329e06e77',
  'd37ee418976dd95753c1c73862b9398fa2a2cf9b4ff0fdfe8b30cd95209614b7',
  '4e3bbb1f7b478dcfe71fb631631519a3bca12c9aefca1612bfce4c13a86264d4',
  '76e67dadbcdf1e10e1b74ddc608abd2f98dfb16fbce75277b5232a127f2087ef',
  'ddb89be403809e325750d3d263cd78929c2942b7942a34b77e122c9594a74c8c',
  '5dc9da79a70659a9ad559cb701ded9a2ab9d823aad2f4960cfe370eff4604328',
];
const node = {
  a: '96a296d224f285c67bee93c30f8a309157f0daa35dc5b87e410b78630a09cfc7',
  b: '5f083f0a1a33ca076a95279832580db3e0ef4584bdff1f54c8a360f50de3031e',
  c: '6b47aaf29ee3c2af9af889bc1fb9254dabd31177f16232dd6aab035ca39bf6e4',
  d: 'bc1a0643b12e4d2d7c77918f44e0f4f79a838b6cf9ec5b5c283e1f4d88599e6b',
  e: 'ca854ea128ed050b41b35ffc1b87b8eb2bde461e9e3b5596ece6b9d5975a0ae0',
  f: '0ebc5d3437fbe2db158b9f126a1d118e308181031d0a949f8dededebc558ef6a',
};

describe('the tree of the published vectors', () => {
  it.each(roots.map((root, size) => [size, root] as const))('of %i leaves has root %s', (size, root) => {
    expect(rootOf(leaves.slice(0, size))).toBe(root);
    const tree = new CompactTree();
    for (const hash of leaves.slice(0, size)) tree.append(hash);
    expect([tree.size, tree.root]).toEqual([size, root]);
  });

  it.each([
    [0, 8, [node.a, node.b, node.c]],
    [5, 8, [node.d, node.e, roots[4]]],
    [2, 3, [roots[2]]],
    [1, 5, [roots[1], node.b, node.d]],
  ])('proves leaf %i in a tree of %i', (index, size, proof) => {
    expect(inclusionProof(leaves.slice(0, size), index)).toEqual(proof);
  });

  it.each([
    [1, 8, [node.a, node.b, node.c]],
    [2, 5, [node.b, node.d]],
    [4, 8, [node.c]],
    [6, 8, [node.f, node.e, roots[4]]],
  ])('proves that size %i is a beginning of size %i', (older, size, proof) => {
    expect(consistencyProof(leaves.slice(0, size), older)).toEqual(proof);
  });
});

const hashes = fc.array(fc.string().map(leafHash), { minLength: 1, maxLength: 40 });
const place = (fraction: number, count: number) => Math.min(count - 1, Math.floor(fraction * count));
const fraction = fc.double({ min: 0, max: 1, noNaN: true });

describe('any tree', () => {
  it('has the same root whether built at once, leaf by leaf, or across a restart', () => {
    fc.assert(
      fc.property(hashes, (all) => {
        let tree = new CompactTree();
        for (const [index, hash] of all.entries()) {
          tree.append(hash);
          expect(tree.root).toBe(rootOf(all.slice(0, index + 1)));
          tree = CompactTree.from(tree.serialise());
        }
      }),
    );
  });

  it('proves each of its leaves, and no other leaf, place, size or root', () => {
    fc.assert(
      fc.property(hashes, fraction, (all, at) => {
        const index = place(at, all.length);
        const claim = {
          leafHash: all[index] ?? '',
          index,
          size: all.length,
          proof: inclusionProof(all, index),
          root: rootOf(all),
        };
        expect(verifyInclusion(claim)).toBe(true);
        expect(verifyInclusion({ ...claim, leafHash: leafHash('another leaf') })).toBe(false);
        expect(verifyInclusion({ ...claim, root: emptyRoot })).toBe(false);
        expect(verifyInclusion({ ...claim, index: all.length })).toBe(false);
        expect(verifyInclusion({ ...claim, proof: [...claim.proof, emptyRoot] })).toBe(false);
        if (claim.proof.length > 0) expect(verifyInclusion({ ...claim, proof: claim.proof.slice(1) })).toBe(false);
      }),
    );
  });

  it('proves each of its beginnings, and no other past', () => {
    fc.assert(
      fc.property(hashes, fraction, (all, at) => {
        const olderSize = place(at, all.length + 1);
        const olderRoot = rootOf(all.slice(0, olderSize));
        const claim = {
          olderSize,
          olderRoot,
          size: all.length,
          root: rootOf(all),
          proof: consistencyProof(all, olderSize),
        };
        expect(verifyConsistency(claim)).toBe(true);
        expect(verifyConsistency({ ...claim, olderRoot: leafHash('another past') })).toBe(false);
        expect(verifyConsistency({ ...claim, proof: [...claim.proof, emptyRoot] })).toBe(false);
        expect(verifyConsistency({ ...claim, olderSize: all.length + 1 })).toBe(false);
        if (olderSize > 0) expect(verifyConsistency({ ...claim, root: leafHash('another present') })).toBe(false);
        if (claim.proof.length > 0) expect(verifyConsistency({ ...claim, proof: claim.proof.slice(1) })).toBe(false);
      }),
    );
  });

  it('answers no to proofs that are not made of hashes', () => {
    expect(verifyInclusion({ leafHash: emptyRoot, index: 0, size: 2, proof: ['zz'], root: emptyRoot })).toBe(false);
    expect(verifyInclusion({ leafHash: emptyRoot, index: -1, size: 2, proof: [], root: emptyRoot })).toBe(false);
    expect(verifyConsistency({ olderSize: 1, olderRoot: '', size: 2, root: emptyRoot, proof: [] })).toBe(false);
    expect(verifyConsistency({ olderSize: 1.5, olderRoot: emptyRoot, size: 2, root: emptyRoot, proof: [] })).toBe(
      false,
    );
  });

  it('has no proof for a place it does not have', () => {
    expect(() => inclusionProof([emptyRoot], 0)).not.toThrow();
    expect(() => inclusionProof([emptyRoot], 1)).toThrow('no place 1');
    expect(() => inclusionProof([], 0)).toThrow('no place 0');
    expect(() => consistencyProof([emptyRoot], 1)).not.toThrow();
    expect(() => consistencyProof([emptyRoot], 2)).toThrow('no place 2');
  });
});

describe('a serialised tree', () => {
  it.each([
    '',
    '{}',
    '{"size":1,"roots":[]}',
    '{"size":2,"roots":["00"]}',
    '{"size":-1,"roots":[]}',
    '{"size":0,"roots":[],"x":1}',
  ])('is not %j', (text) => {
    expect(() => CompactTree.from(text)).toThrow();
  });
  it('takes no leaf that is not a hash', () => {
    expect(() => new CompactTree().append('00')).toThrow('64 hexadecimal digits');
  });
});
