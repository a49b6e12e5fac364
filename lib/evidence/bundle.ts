import { toBase64, utf8 } from '@/lib/evidence/bytes';
import { canonicalJson, hasExactly, isJsonObject, parseCanonical } from '@/lib/evidence/canonical';
import { type NoteSigner, signNote } from '@/lib/evidence/checkpoint';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import type { Bundle } from '@/lib/evidence/format';
import { isCount, isHexHash, isInstant, isOriginName, isUuid } from '@/lib/evidence/formats';
import { sha256 } from '@/lib/evidence/hash';

/** 64 million characters: some thirty thousand entries with their parts. Pictures are not inside. */
export const maxBundleCharacters = 64_000_000;
/** Each entry costs one signature check, about a millisecond. */
export const maxBundleEntries = 20_000;
/** So does each log; a machine draws from a handful of shelves. */
export const maxBundleLogs = 500;
/** A bad signature is tried with every key that calls itself the same. */
export const maxBundleKeys = 100;

/**
 * Signs a bundle: the same bundle with its `signature`.
 *
 * @throws EvidenceError `not-canonical` if it holds what JSON cannot
 * @example bundleText(signBundle(unsigned, { name, privateKeySeed }));
 */
export function signBundle(unsigned: Omit<Bundle, 'signature'>, signer: NoteSigner): Bundle {
  return { ...unsigned, signature: signNote(bundleStatement(unsigned), signer) };
}

/**
 * The three lines that a bundle's signature stands under.
 *
 * @example bundleStatement(bundle) === parseNote(bundle.signature).text; // true
 */
export function bundleStatement(bundle: Omit<Bundle, 'signature'>): string {
  const unsigned = Object.fromEntries(Object.entries(bundle).filter(([name]) => name !== 'signature'));
  return `witnessmark/bundle/1\n${bundle.madeAt}\n${toBase64(sha256(utf8(canonicalJson(unsigned))))}\n`;
}

/**
 * The text of a bundle, as it stands in `record.json`: its RFC 8785 form.
 *
 * @example parseBundle(bundleText(bundle)).number;
 */
export function bundleText(bundle: Bundle): string {
  return canonicalJson(bundle);
}

/**
 * Reads a bundle, strictly: canonical, exactly its members, each of its form. Checks no hash and no signature.
 *
 * @throws EvidenceError `malformed`, `not-canonical` or `too-large`
 * @example parseBundle(text).logs.length; // 2
 */
export function parseBundle(text: string): Bundle {
  if (text.length > maxBundleCharacters)
    throw new EvidenceError('too-large', 'This record is larger than any real one.');
  const value = parseCanonical(text);
  demandBundle(value);
  return value;
}

/**
 * Refuses a value that does not have the shape of a bundle; the message says where.
 *
 * @throws EvidenceError `malformed` or `too-large`
 * @example demandBundle(parseJson(text));
 */
export function demandBundle(value: unknown): asserts value is Bundle {
  demand(isShape(value, bundleShape), 'the file');
  const bundle = value as unknown as Bundle;
  const hasMany = bundle.logs.length > maxBundleLogs || bundle.verifierKeys.length > maxBundleKeys;
  if (hasMany)
    throw new EvidenceError('too-large', `This record has more than ${maxBundleLogs} logs or ${maxBundleKeys} keys.`);
  bundle.logs.forEach((log, index) => {
    demand(isShape(log, logShape), `logs[${index}]`);
    log.entries.forEach((entry, seq) => {
      const where = `logs[${index}].entries[${seq}]`;
      demand(isShape(entry, entryShape), where);
      demand(isShape(entry.seal, sealShape), `${where}.seal`);
    });
  });
  bundle.files.forEach((file, index) => demand(isShape(file, fileShape), `files[${index}]`));
  const entries = bundle.logs.reduce((total, log) => total + log.entries.length, 0);
  if (entries > maxBundleEntries)
    throw new EvidenceError('too-large', `This record has more than ${maxBundleEntries} entries.`);
  demand(new Set(bundle.logs.map((log) => log.id)).size === bundle.logs.length, 'logs, each once');
  demand(new Set(bundle.files.map((file) => file.name)).size === bundle.files.length, 'files, each name once');
}

type Shape = Record<string, (value: unknown) => boolean>;
const isText = (value: unknown): boolean => typeof value === 'string';
const isTexts = (value: unknown): boolean => Array.isArray(value) && value.every(isText);
const isHashOrNull = (value: unknown): boolean => value === null || isHexHash(value);

const bundleShape: Shape = {
  format: (value) => value === 'witnessmark/bundle/1',
  madeAt: isInstant,
  purpose: isText,
  number: isText,
  verifierKeys: isTexts,
  packetCertificate: isHashOrNull,
  logs: (value) => Array.isArray(value) && value.length > 0,
  files: Array.isArray,
  signature: isText,
};
const logShape: Shape = {
  id: isUuid,
  subject: (value) => value === 'machine' || value === 'shelf',
  origin: isOriginName,
  checkpoint: isText,
  entries: Array.isArray,
};
const entryShape: Shape = { leaf: isText, parts: isTexts, seal: isJsonObject };
const sealShape: Shape = { checkpoint: isText, tokens: isTexts };
const fileShape: Shape = {
  sha256: isHexHash,
  name: (value) => typeof value === 'string' && value !== '',
  mediaType: isText,
  bytes: isCount,
  included: (value) => typeof value === 'boolean',
  derivedFrom: isHashOrNull,
};

function isShape(value: unknown, shape: Shape): boolean {
  const names = Object.keys(shape);
  return isJsonObject(value) && hasExactly(value, names) && names.every((name) => shape[name]?.(value[name]) === true);
}

function demand(holds: boolean, where: string): void {
  if (!holds) throw new EvidenceError('malformed', `The record is not of its form: ${where}.`);
}
