import { fromBase64 } from '@/lib/evidence/bytes';
import type { Stamp } from '@/lib/evidence/finding';
import { type Findings, reasonOf } from '@/lib/evidence/findings';
import { sha256Hex } from '@/lib/evidence/hash';
import { StampTrust } from '@/lib/evidence/stamp-trust';
import { checkToken, isTokenOf } from '@/lib/evidence/token';

const maxTokensPerSeal = 16;
/** The clock of whoever checks may be this much behind. */
const clockToleranceMilliseconds = 300_000;

/** What time stamps are judged by. */
export interface StampCheck {
  trust: StampTrust;
  /** When this is checked, in milliseconds since 1970; a stamp from later is none. Undefined: not asked. */
  at?: number | undefined;
}

/**
 * Checks the time stamps on a seal: each must hold by itself and have been made for exactly this signed note. One that
 * does not is named and left out of what is returned.
 *
 * @param size size of the checkpoint they stand on
 * @example readStamps(entry.seal, { log, seq: 2 }, 3, findings).length;
 */
export function readStamps(
  seal: { checkpoint: string; tokens: string[] },
  place: { log: string; seq: number },
  size: number,
  findings: Findings,
  check: StampCheck = { trust: new StampTrust() },
): Stamp[] {
  const stamps: Stamp[] = [];
  if (seal.tokens.length > maxTokensPerSeal) {
    const sentence = `Entry ${place.seq} carries more time stamps than any real one.`;
    findings.alter('token-invalid', place, sentence, `${seal.tokens.length} tokens, at most ${maxTokensPerSeal}`);
  }
  for (const base64 of seal.tokens.slice(0, maxTokensPerSeal)) {
    try {
      const der = fromBase64(base64);
      const token = checkToken(der);
      const { genTime, serial, policy } = token;
      if (!isTokenOf(token, seal.checkpoint)) {
        const sentence = `A time stamp of entry ${place.seq} was made for something else.`;
        findings.alter('token-invalid', place, sentence, 'the imprint is not SHA-256 of the signed checkpoint');
      } else if (check.at !== undefined && Date.parse(genTime) > check.at + clockToleranceMilliseconds) {
        const sentence = `A time stamp of entry ${place.seq} says ${genTime}, which has not come yet.`;
        findings.alter('token-invalid', place, sentence, `checked at ${new Date(check.at).toISOString()}`);
      } else {
        stamps.push({ genTime, serial, policy, size, sha256: sha256Hex(der), ...check.trust.of(token) });
      }
    } catch (error) {
      findings.alter('token-invalid', place, `A time stamp of entry ${place.seq} does not hold.`, reasonOf(error));
    }
  }
  return stamps;
}
