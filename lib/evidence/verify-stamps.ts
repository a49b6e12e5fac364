import { fromBase64 } from '@/lib/evidence/bytes';
import type { Stamp } from '@/lib/evidence/finding';
import { type Findings, reasonOf } from '@/lib/evidence/findings';
import { sha256Hex } from '@/lib/evidence/hash';
import { isTokenOf, readToken } from '@/lib/evidence/token';

const maxTokensPerSeal = 16;

/**
 * Reads the time stamps on a seal: each must have been made for exactly this signed note.
 *
 * @param size size of the checkpoint they stand on
 * @example readStamps(entry.seal, { log, seq: 2 }, 3, findings).length;
 */
export function readStamps(
  seal: { checkpoint: string; tokens: string[] },
  place: { log: string; seq: number },
  size: number,
  findings: Findings,
): Stamp[] {
  const stamps: Stamp[] = [];
  if (seal.tokens.length > maxTokensPerSeal) {
    const sentence = `Entry ${place.seq} carries more time stamps than any real one.`;
    findings.alter('token-invalid', place, sentence, `${seal.tokens.length} tokens, at most ${maxTokensPerSeal}`);
  }
  for (const base64 of seal.tokens.slice(0, maxTokensPerSeal)) {
    try {
      const token = readToken(fromBase64(base64));
      if (isTokenOf(token, seal.checkpoint)) {
        const { genTime, serial, policy } = token;
        const der = sha256Hex(fromBase64(base64));
        stamps.push({ genTime, serial, policy, size, sha256: der, signer: null, trust: 'unknown', root: null });
      } else {
        const sentence = `A time stamp of entry ${place.seq} was made for something else.`;
        findings.alter('token-invalid', place, sentence, 'the imprint is not SHA-256 of the signed checkpoint');
      }
    } catch (error) {
      findings.alter('token-invalid', place, `A time stamp of entry ${place.seq} cannot be read.`, reasonOf(error));
    }
  }
  return stamps;
}
