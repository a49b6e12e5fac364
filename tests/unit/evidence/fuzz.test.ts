import fc from 'fast-check';
import { PDFDocument } from 'pdf-lib';
import { beforeAll, describe, expect, it } from 'vitest';
import { parseBundle } from '@/lib/evidence/bundle';
import { fromBase64, toBase64, utf8 } from '@/lib/evidence/bytes';
import { parseCanonical, parseJson } from '@/lib/evidence/canonical';
import { parseCheckpoint, parseNote, parseVerifierKey, verifyNote } from '@/lib/evidence/checkpoint';
import { readContainer } from '@/lib/evidence/container';
import { openDisclosure } from '@/lib/evidence/disclosure';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import { givenKey } from '@/lib/evidence/given-key';
import { parseLeaf } from '@/lib/evidence/leaf';
import { CompactTree, inclusionProof, verifyConsistency, verifyInclusion } from '@/lib/evidence/merkle';
import { checkToken, readToken } from '@/lib/evidence/token';
import { verifyBundle } from '@/lib/evidence/verify';
import { makeAuthority, makeToken } from './build-authority';
import { buildRecord, givenFiles, installation, keyOf, signedText, unsignedBundle } from './build-record';

// The way of Go's and Rekor's fuzzing: real inputs, changed at random, and plain garbage. A parser may refuse, and only
// in one way; a verifier never throws; and neither takes longer than its input is long.
const key = keyOf(installation);
const record = buildRecord();
const note = record.machine.seals[2] ?? '';
const leaf = record.machine.built[2];
const disclosure = leaf?.disclosures[2]?.text ?? '';
const text = signedText(unsignedBundle(record));
const hashes = record.machine.built.map(({ hash }) => hash);
const tree = new CompactTree();
for (const hash of hashes) tree.append(hash);

/** Generous: these inputs are a few thousand bytes, and a parser that runs away takes minutes. */
const mostMilliseconds = 5_000;
const runs = { numRuns: 300, seed: 1807 };

/** One to four changes, anywhere: a byte, a cut, a piece twice, a piece from elsewhere. */
const changes = fc.array(
  fc.record({ kind: fc.nat(4), at: fc.double({ min: 0, max: 1, noNaN: true }), length: fc.nat(40), byte: fc.nat(255) }),
  { minLength: 1, maxLength: 4 },
);
function changed(bytes: Uint8Array, list: { kind: number; at: number; length: number; byte: number }[]): Uint8Array {
  let now = Buffer.from(bytes);
  for (const { kind, at, length, byte } of list) {
    const place = Math.floor(at * now.length);
    const [before, piece, after] = [now.subarray(0, place), now.subarray(place, place + length), now.subarray(place + length)]; // prettier-ignore
    const pieces = [
      [before, [byte], now.subarray(place + 1)],
      [before, after],
      [before, piece, piece, after],
      [before, Buffer.alloc(length, byte), now.subarray(place)],
      [before],
    ][kind] ?? [now];
    now = Buffer.concat(pieces.map((part) => Buffer.from(part)));
  }
  return new Uint8Array(now);
}
const asText = (bytes: Uint8Array) => Buffer.from(bytes).toString('utf8');
const textLike = (real: string) =>
  fc.oneof(
    changes.map((list) => asText(changed(utf8(real), list))),
    fc.string({ unit: 'binary', maxLength: 400 }),
    fc.json({ maxDepth: 4 }),
  );
const bytesLike = (real: () => Uint8Array) =>
  fc.oneof(
    changes.map((list) => changed(real(), list)),
    fc.uint8Array({ maxLength: 600 }),
  );

async function refusesOnlyAsItMay(work: () => unknown): Promise<void> {
  const started = performance.now();
  try {
    await work();
  } catch (error) {
    if (!(error instanceof EvidenceError)) throw error;
  }
  expect(performance.now() - started).toBeLessThan(mostMilliseconds);
}

const authority = makeAuthority();
const token = makeToken(note, { by: authority.signer, carried: [authority.between, authority.root] });
let packet: Uint8Array;
beforeAll(async () => {
  const document = await PDFDocument.create();
  document.addPage();
  await document.attach(utf8(text), 'record.json', { mimeType: 'application/json' });
  for (const { name, bytes } of givenFiles) await document.attach(bytes, name, { mimeType: 'image/jpeg' });
  packet = await document.save();
});

describe('whatever it is given, a parser refuses in its one way or reads', () => {
  it.each<[string, string, (input: string) => unknown]>([
    ['a signed note', note, parseNote],
    ['a checkpoint', parseNote(note).text, parseCheckpoint],
    ['a verifier key', key, parseVerifierKey],
    ['a line', leaf?.text ?? '', parseLeaf],
    ['a part', disclosure, openDisclosure],
    ['a bundle', text, parseBundle],
    ['JSON', text, parseJson],
    ['canonical JSON', leaf?.text ?? '', parseCanonical],
    ['base64', toBase64(utf8(note)), fromBase64],
    ['a tree', tree.serialise(), CompactTree.from],
  ])('%s', async (_, real, parse) => {
    expect(() => parse(real)).not.toThrow();
    await fc.assert(
      fc.asyncProperty(textLike(real), (input) => refusesOnlyAsItMay(() => parse(input))),
      runs,
    );
  });

  it.each<[string, () => Uint8Array, (input: Uint8Array) => unknown]>([
    ['a time-stamp token', () => token, readToken],
    ['a time-stamp token with its signature', () => token, checkToken],
    ['a packet', () => packet, readContainer],
  ])('%s', async (_, real, parse) => {
    await parse(real());
    await fc.assert(
      fc.asyncProperty(bytesLike(real), (input) => refusesOnlyAsItMay(() => parse(input))),
      runs,
    );
  });
});

describe('whatever it is given, a check answers', () => {
  it('of a note', () => {
    expect(verifyNote(note, key)).toBe(true);
    fc.assert(fc.property(textLike(note), textLike(key), (one, other) => typeof verifyNote(one, other) === 'boolean'), runs); // prettier-ignore
  });

  it('of a proof in the tree, and never yes to a changed one', () => {
    const proof = inclusionProof(hashes, 2);
    const claim = { leafHash: hashes[2] ?? '', index: 2, size: hashes.length, proof, root: tree.root };
    expect(verifyInclusion(claim)).toBe(true);
    const hash = fc.oneof(fc.constantFrom(...hashes, tree.root), fc.string({ unit: 'binary', maxLength: 70 }), fc.stringMatching(/^[0-9a-f]{64}$/)); // prettier-ignore
    const count = fc.oneof(fc.nat(10), fc.double(), fc.constantFrom(-1, Number.MAX_SAFE_INTEGER, NaN));
    fc.assert(
      fc.property(hash, count, count, fc.array(hash, { maxLength: 6 }), (leaf, index, size, path) => {
        const isReal = leaf === claim.leafHash && index === 2 && size === claim.size && String(path) === String(proof);
        expect(verifyInclusion({ leafHash: leaf, index, size, proof: path, root: tree.root })).toBe(isReal);
        expect(typeof verifyConsistency({ olderSize: index, olderRoot: leaf, size, root: tree.root, proof: path })).toBe('boolean'); // prettier-ignore
      }),
      runs,
    );
  });

  it('of a record, and never “unchanged” to a changed one', { timeout: 120_000 }, () => {
    expect(verifyBundle({ bundleText: text, key }).outcome).toBe('unchanged');
    fc.assert(
      fc.property(textLike(text), (bundleText) => {
        const { outcome } = verifyBundle({ bundleText, key });
        expect(outcome === 'unchanged').toBe(bundleText === text);
      }),
      { ...runs, numRuns: 150 },
    );
  });

  it('to an older memory and a key of any kind', { timeout: 120_000 }, () => {
    fc.assert(
      fc.property(textLike(note), textLike(key), (against, given) => {
        expect(['unchanged', 'altered']).toContain(verifyBundle({ bundleText: text, key, against }).outcome);
        expect(givenKey(given, text)).toBeTypeOf('object');
      }),
      { ...runs, numRuns: 60 },
    );
  });
});
