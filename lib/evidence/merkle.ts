import { fromHex, joinBytes } from '@/lib/evidence/bytes';
import { hasExactly, isJsonObject, parseJson } from '@/lib/evidence/canonical';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import { isCount, isHexHash } from '@/lib/evidence/formats';
import { sha256Hex } from '@/lib/evidence/hash';

const nodePrefix = new Uint8Array([1]);
/** Root of the empty tree: SHA-256 of nothing. */
export const emptyRoot = 'e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855';

/**
 * Hash of an inner node: SHA-256 over 0x01, left and right (RFC 6962 §2.1). All hashes here are lower-case hex.
 *
 * @example nodeHash(leafHash('a'), leafHash('b')) === rootOf([leafHash('a'), leafHash('b')]);
 */
export function nodeHash(left: string, right: string): string {
  return sha256Hex(joinBytes(nodePrefix, fromHex(left), fromHex(right)));
}

/**
 * Root of the tree over these leaf hashes (RFC 6962 §2.1).
 *
 * @example rootOf([]); // 'e3b0c442…', SHA-256 of nothing
 */
export function rootOf(leafHashes: readonly string[]): string {
  return leafHashes.length === 0 ? emptyRoot : rangeRoot(leafHashes, 0, leafHashes.length);
}

/**
 * Audit path of one leaf in the tree over these leaf hashes (RFC 6962 §2.1.1), nearest sibling first.
 *
 * @throws EvidenceError `malformed` if there is no such leaf
 * @example inclusionProof(hashes, 0); // for eight leaves, three hashes
 */
export function inclusionProof(leafHashes: readonly string[], index: number): string[] {
  demandIndex(index, leafHashes.length - 1);
  const path: string[] = [];
  let [start, end] = [0, leafHashes.length];
  while (end - start > 1) {
    const middle = start + splitOf(end - start);
    if (index < middle) {
      path.push(rangeRoot(leafHashes, middle, end));
      end = middle;
    } else {
      path.push(rangeRoot(leafHashes, start, middle));
      start = middle;
    }
  }
  return path.reverse();
}

/**
 * Proof that the tree over the first `olderSize` leaves is a beginning of the whole (RFC 6962 §2.1.2).
 *
 * @throws EvidenceError `malformed` unless 0 ≤ olderSize ≤ number of leaves
 * @example consistencyProof(hashes, 4); // for eight leaves, one hash
 */
export function consistencyProof(leafHashes: readonly string[], olderSize: number): string[] {
  demandIndex(olderSize, leafHashes.length);
  if (olderSize === 0 || olderSize === leafHashes.length) return [];
  const path: string[] = [];
  let [start, end] = [0, leafHashes.length];
  while (end !== olderSize) {
    const middle = start + splitOf(end - start);
    if (olderSize <= middle) {
      path.push(rangeRoot(leafHashes, middle, end));
      end = middle;
    } else {
      path.push(rangeRoot(leafHashes, start, middle));
      start = middle;
    }
  }
  // The older tree itself is known to whoever checks, so its root is left out when it is one whole subtree.
  if (start > 0) path.push(rangeRoot(leafHashes, start, end));
  return path.reverse();
}

/**
 * Whether a leaf is at this index of the tree with this root (RFC 9162 §2.1.3.2). Never throws.
 *
 * @example verifyInclusion({ leafHash, index: 5, size: 8, proof, root }); // true
 */
export function verifyInclusion(claim: {
  leafHash: string;
  index: number;
  size: number;
  proof: readonly string[];
  root: string;
}): boolean {
  const { index, size, proof, root } = claim;
  if (!isCount(index) || !isCount(size) || index >= size || ![claim.leafHash, root, ...proof].every(isHexHash))
    return false;
  let [position, last, hash] = [index, size - 1, claim.leafHash];
  for (const sibling of proof) {
    if (last === 0) return false;
    if (position % 2 === 1 || position === last) {
      hash = nodeHash(sibling, hash);
      while (position % 2 === 0 && position !== 0) [position, last] = [half(position), half(last)];
    } else {
      hash = nodeHash(hash, sibling);
    }
    [position, last] = [half(position), half(last)];
  }
  return last === 0 && hash === root;
}

/**
 * Whether the older tree is a beginning of the newer one (RFC 9162 §2.1.4.2). Never throws.
 *
 * @example verifyConsistency({ olderSize: 2, olderRoot, size: 5, root, proof }); // true
 */
export function verifyConsistency(claim: {
  olderSize: number;
  olderRoot: string;
  size: number;
  root: string;
  proof: readonly string[];
}): boolean {
  const { olderSize, olderRoot, size, root, proof } = claim;
  if (!isCount(olderSize) || !isCount(size) || olderSize > size || ![olderRoot, root, ...proof].every(isHexHash))
    return false;
  if (olderSize === size) return proof.length === 0 && olderRoot === root;
  if (olderSize === 0) return proof.length === 0 && olderRoot === emptyRoot;
  let [position, last] = [olderSize - 1, size - 1];
  while (position % 2 === 1) [position, last] = [half(position), half(last)];
  const path = position === 0 ? [olderRoot, ...proof] : [...proof];
  const first = path.shift();
  if (first === undefined) return false;
  let [older, newer] = [first, first];
  for (const sibling of path) {
    if (last === 0) return false;
    if (position % 2 === 1 || position === last) {
      older = nodeHash(sibling, older);
      newer = nodeHash(sibling, newer);
      while (position % 2 === 0 && position !== 0) [position, last] = [half(position), half(last)];
    } else {
      newer = nodeHash(newer, sibling);
    }
    [position, last] = [half(position), half(last)];
  }
  return last === 0 && older === olderRoot && newer === root;
}

/**
 * The tree kept as the roots of its whole subtrees, largest first: appending costs O(log n) and needs no earlier leaf.
 *
 * @example
 * const tree = new CompactTree();
 * tree.append(hash);
 * tree.root; // the same as rootOf([hash])
 */
export class CompactTree {
  #size = 0;
  readonly #roots: string[] = [];

  get size(): number {
    return this.#size;
  }

  /** Root over every leaf appended so far, hex. */
  get root(): string {
    return this.#roots.length === 0 ? emptyRoot : this.#roots.reduceRight((right, left) => nodeHash(left, right));
  }

  /**
   * Appends a leaf hash.
   *
   * @throws EvidenceError `malformed` unless it is 64 lower-case hexadecimal digits
   */
  append(leafHash: string): void {
    if (!isHexHash(leafHash))
      throw new EvidenceError('malformed', 'A leaf hash is 64 hexadecimal digits in lower case.');
    let hash = leafHash;
    for (let count = this.#size; count % 2 === 1; count = Math.floor(count / 2)) {
      hash = nodeHash(this.#roots.pop() ?? emptyRoot, hash);
    }
    this.#roots.push(hash);
    this.#size += 1;
  }

  /** A text from which `CompactTree.from` makes the same tree. */
  serialise(): string {
    return JSON.stringify({ size: this.#size, roots: this.#roots });
  }

  /**
   * The tree of a serialised text.
   *
   * @throws EvidenceError `malformed` if it is not one
   * @example CompactTree.from(tree.serialise()).root === tree.root; // true
   */
  static from(text: string): CompactTree {
    const value = parseJson(text);
    if (!isJsonObject(value) || !hasExactly(value, ['size', 'roots']) || !isCount(value.size)) throw notATree();
    const { roots, size } = value;
    const wholeSubtrees = [...BigInt(size).toString(2)].filter((bit) => bit === '1').length;
    if (!Array.isArray(roots) || roots.length !== wholeSubtrees || !roots.every(isHexHash)) throw notATree();
    const tree = new CompactTree();
    tree.#size = size;
    tree.#roots.push(...roots);
    return tree;
  }
}

/** Largest power of two below n, for n of at least 2. */
function splitOf(size: number): number {
  let split = 1;
  while (split * 2 < size) split *= 2;
  return split;
}

function rangeRoot(leafHashes: readonly string[], start: number, end: number): string {
  if (end - start === 1) return leafHashes[start] ?? '';
  const middle = start + splitOf(end - start);
  return nodeHash(rangeRoot(leafHashes, start, middle), rangeRoot(leafHashes, middle, end));
}

function demandIndex(index: number, highest: number): void {
  if (!isCount(index) || index > highest)
    throw new EvidenceError('malformed', `There is no place ${index} in this tree.`);
}

const half = (count: number): number => Math.floor(count / 2);

function notATree(): EvidenceError {
  return new EvidenceError('malformed', 'This is not a serialised tree.');
}
