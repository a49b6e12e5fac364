import 'server-only';
import { bytesOf, integerOf, isConstructed, itemsOf, readElement, sequenceOf, stringOf } from '@/lib/evidence/der';
import { sameBytes } from '@/lib/evidence/bytes';
import { oids } from '@/lib/evidence/oids';
import { checkToken } from '@/lib/evidence/token';

/** Two honest clocks may differ by this much. */
const toleratedFutureMilliseconds = 60_000;

/** What a granted reply holds, once every check has passed. */
export interface CheckedReply {
  /** DER of the token (ContentInfo), as the authority sent it. */
  token: Uint8Array;
  genTime: Date;
}

/**
 * Checks an authority's reply as RFC 3161 §2.4.2 asks its client to: status, imprint and nonce here, the rest by the
 * same code that every reader's verifier runs, so that nothing is kept which a reader would refuse. Whether anybody
 * trusts the certificate is for each reader to decide. Throws with a sentence that says what is wrong.
 */
export function checkReply(reply: Uint8Array, expected: { digest: Uint8Array; nonce: bigint; at: Date }): CheckedReply {
  const { status, reason, token } = readReply(reply);
  if (status !== 0 && status !== 1) {
    throw new Error(`The authority refused with status ${status}${reason === '' ? '.' : `: ${reason}`}`);
  }
  if (token === null) throw new Error('The authority’s reply holds no token.');
  const checked = checkToken(token);
  if (checked.imprintAlgorithm !== oids.sha256 || !sameBytes(checked.imprint, expected.digest)) {
    throw new Error('The token stands on other data.');
  }
  if (checked.nonce !== expected.nonce) throw new Error('The token answers another request: its nonce differs.');
  const genTime = new Date(checked.genTime);
  if (genTime.getTime() > expected.at.getTime() + toleratedFutureMilliseconds) {
    throw new Error(`The token’s time ${checked.genTime} is in the future. Compare the clocks.`);
  }
  return { token, genTime };
}

/** TimeStampResp, RFC 3161 §2.4.2. */
function readReply(der: Uint8Array): { status: number; reason: string; token: Uint8Array | null } {
  try {
    const [info, token] = sequenceOf(readElement(new Uint8Array(der)));
    const [status, ...rest] = sequenceOf(info);
    // Texts and the reason as bits may both be left out.
    const texts = rest.filter(isConstructed).flatMap(itemsOf).map(stringOf);
    return {
      status: Number(integerOf(status)),
      reason: texts.filter((text) => text !== null).join(' '),
      token: token === undefined ? null : new Uint8Array(bytesOf(token)),
    };
  } catch (cause) {
    throw new Error('The authority did not answer with a time-stamp reply.', { cause });
  }
}
