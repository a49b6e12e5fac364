import { joinBytes, utf8 } from '@/lib/evidence/bytes';
import { canonicalJson, hasExactly, isJsonObject, parseCanonical } from '@/lib/evidence/canonical';
import { isPartName, makeDisclosure } from '@/lib/evidence/disclosure';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import {
  type EntryKind,
  type Leaf,
  machineKinds,
  type PartName,
  type Reference,
  shelfKinds,
} from '@/lib/evidence/format';
import { isBase64UrlOf, isCount, isHexHash, isInstant, isUuid } from '@/lib/evidence/formats';
import { sha256Hex } from '@/lib/evidence/hash';

const leafMembers = ['format', 'log', 'seq', 'previous', 'kind', 'sealedAt', 'refersTo', 'parts'];
const kinds: ReadonlySet<unknown> = new Set([...machineKinds, ...shelfKinds]);
const leafPrefix = new Uint8Array([0]);

/** What a line of a log is made of. */
export interface LeafInput {
  log: string;
  seq: number;
  /** Leaf hash of the line before; null at seq 0. */
  previous: string | null;
  kind: EntryKind;
  sealedAt: string;
  refersTo: Reference | null;
  parts: { name: PartName; value: unknown; salt: string }[];
}

/** A line ready to be stored, with its parts beside it. */
export interface BuiltLeaf {
  leaf: Leaf;
  /** The RFC 8785 form: what is hashed, stored and shown. */
  text: string;
  /** Leaf hash, hex. */
  hash: string;
  /** In the order of the leaf's parts. */
  disclosures: { name: PartName; text: string }[];
}

/**
 * Builds a line of a log and its disclosures.
 *
 * @throws EvidenceError if anything is not of the form that `parseLeaf` demands, or a part may not be sealed
 * @example buildLeaf({ log, seq: 0, previous: null, kind: 'opening', sealedAt, refersTo: null, parts }).hash;
 */
export function buildLeaf(input: LeafInput): BuiltLeaf {
  const made = input.parts
    .map((part) => ({ name: part.name, ...makeDisclosure(part.name, part.value, part.salt) }))
    .sort((one, other) => (one.name < other.name ? -1 : 1));
  const text = canonicalJson({
    format: 'witnessmark/leaf/1',
    log: input.log,
    seq: input.seq,
    previous: input.previous,
    kind: input.kind,
    sealedAt: input.sealedAt,
    refersTo: input.refersTo,
    parts: made.map(({ name, digest }) => ({ name, digest })),
  });
  const disclosures = made.map(({ name, disclosure }) => ({ name, text: disclosure }));
  return { leaf: parseLeaf(text), text, hash: leafHash(text), disclosures };
}

/**
 * Leaf hash: SHA-256 over 0x00 and the leaf's bytes (RFC 6962 §2.1), hex.
 *
 * @example leafHash(''); // '6e340b9cffb37a989ca544e6bb780a2c78901d3fb33738768511a30617afa01d'
 */
export function leafHash(text: string): string {
  return sha256Hex(joinBytes(leafPrefix, utf8(text)));
}

/**
 * Reads a leaf, strictly: its own RFC 8785 form, exactly its members, each of its form.
 *
 * @throws EvidenceError `not-canonical` or `malformed`
 * @example parseLeaf(text).kind; // 'service'
 */
export function parseLeaf(text: string): Leaf {
  const value = parseCanonical(text);
  if (!isJsonObject(value) || !hasExactly(value, leafMembers))
    throw malformed('does not have exactly its eight members');
  const { format, log, seq, previous, kind, sealedAt, refersTo, parts } = value;
  if (format !== 'witnessmark/leaf/1') throw malformed('is not of format witnessmark/leaf/1');
  if (!isUuid(log)) throw malformed('has a log that is not a UUID in lower case');
  if (!isCount(seq)) throw malformed('has a number that is not a whole number from 0 on');
  if (seq === 0 ? previous !== null : !isHexHash(previous))
    throw malformed('does not name the line before it as it must');
  if (!kinds.has(kind)) throw malformed('is of a kind that this format does not know');
  if ((kind === 'opening') !== (seq === 0)) throw malformed('is an opening elsewhere than at entry 0, or none there');
  if (!isInstant(sealedAt)) throw malformed('has a sealing time that is not an instant in UTC with milliseconds');
  if (refersTo !== null && !(isReference(refersTo) && refersTo.seq < seq))
    throw malformed('refers to no earlier entry');
  if (!Array.isArray(parts) || !parts.every(isPartEntry)) throw malformed('has a part without a known name and digest');
  const isSorted = parts.every((part, index) => index === 0 || (parts[index - 1]?.name ?? '') < part.name);
  if (!isSorted) throw malformed('does not name its parts in order, each once');
  return value as unknown as Leaf;
}

/**
 * Whether a value is exactly `{ seq, leafHash }`.
 *
 * @example isReference({ seq: 0, leafHash: '6e34…' }); // false, the hash is too short
 */
export function isReference(value: unknown): value is Reference {
  return (
    isJsonObject(value) && hasExactly(value, ['seq', 'leafHash']) && isCount(value.seq) && isHexHash(value.leafHash)
  );
}

function isPartEntry(value: unknown): value is { name: PartName; digest: string } {
  return (
    isJsonObject(value) &&
    hasExactly(value, ['name', 'digest']) &&
    isPartName(value.name) &&
    isBase64UrlOf(value.digest, 32)
  );
}

function malformed(what: string): EvidenceError {
  return new EvidenceError('malformed', `This line ${what}.`);
}
