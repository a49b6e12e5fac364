import { fingerprint, parseVerifierKey } from '@/lib/evidence/checkpoint';

/**
 * `refusal` says why nothing was checked: a key that was copied badly is no alteration of the record. `isOtherKey`: it
 * was copied well, and the file was signed with another.
 */
export type GivenKey =
  { verifierKey?: string; refusal?: undefined } | { verifierKey?: undefined; refusal: string; isOtherKey?: true };

/**
 * The verifier key that a reader means. People hold a key whole, or by its fingerprint on paper: then the file must
 * list the key that has it. An empty text means no key. Never throws.
 *
 * @example givenKey('4d97 38d5 40da', bundleText).refusal; // 'This is neither a verifier key … Copy it whole.'
 */
export function givenKey(typed: string, bundleText: string): GivenKey {
  const text = typed.replace(/\s+/g, '');
  if (text === '') return {};
  if (/^[0-9a-f]{64}$/i.test(text)) {
    const found = listedKeys(bundleText).find((key) => fingerprintOf(key) === text.toLowerCase());
    return found === undefined
      ? {
          refusal: 'This file lists no key with that fingerprint. It was signed with another key than yours.',
          isOtherKey: true,
        }
      : { verifierKey: found };
  }
  if (fingerprintOf(text) !== null) return { verifierKey: text };
  return {
    refusal:
      'This is neither a verifier key (name+hash+base64) nor a fingerprint of 64 digits and letters a to f. Copy it whole.',
  };
}

/**
 * The verifier keys that a file lists, the one it presents as its own first. Never throws.
 *
 * @example listedKeys(bundleText)[0]; // 'records.garage.example+1f2e3d4c+AXk…'
 */
export function listedKeys(bundleText: string): string[] {
  try {
    const { verifierKeys } = JSON.parse(bundleText) as { verifierKeys?: unknown };
    return Array.isArray(verifierKeys) ? verifierKeys.filter((key) => typeof key === 'string') : [];
  } catch {
    return [];
  }
}

function fingerprintOf(key: string): string | null {
  try {
    // It comes in groups, as people compare it.
    return fingerprint(parseVerifierKey(key).publicKey).replace(/\s+/g, '');
  } catch {
    return null;
  }
}
