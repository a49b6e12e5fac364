import 'server-only';
import { createHash } from 'node:crypto';
import { oids } from '@/lib/evidence/oids';
import { now } from '@/lib/ports/clock';
import { type PacketCertificate, packetCertificate } from '@/lib/ports/packet-certificate';
import { attribute, contentInfo, signAttributes } from '@/lib/ports/signed-data';
import { authorities } from '@/lib/ports/time-stamp-authority/authorities';
import { checkReply } from '@/lib/ports/time-stamp-authority/check-reply';
import { buildRequest, newNonce } from '@/lib/ports/time-stamp-authority/request';
import type { TimeStampAuthority } from '@/lib/ports/time-stamp-authority/time-stamp-authority';

/** Somebody waits for the packet: an authority that takes longer is done without. */
const stampWithinMilliseconds = 5_000;

/** Signs the bytes of packets with one certificate, whatever becomes of its file meanwhile. */
export interface PageSigner {
  /** Hex SHA-256 of the certificate. */
  certificate: string;
  /**
   * DER of a detached signature (CAdES, ETSI EN 319 122-1) over bytes of this SHA-256, with the certificate and its
   * root, at most `room` bytes long. It carries a time stamp if an authority gives one in time and there is room for it.
   */
  sign(digest: Uint8Array, room: number): Promise<Uint8Array>;
}

/** The signer of new packets. Throws with a sentence for the steward if its file cannot be used. */
export function pageSigner(
  given: { certificate?: PacketCertificate; stampedBy?: TimeStampAuthority[]; within?: number } = {},
): PageSigner {
  const {
    certificate: chain = packetCertificate(),
    stampedBy = othersFirst(),
    within = stampWithinMilliseconds,
  } = given;
  return {
    certificate: chain.sha256,
    async sign(digest, room) {
      // No signing time among them: in a PDF it stands in the signature dictionary (ETSI EN 319 142-1 §5.3).
      const signed = signAttributes({ contentType: oids.data, digest, chain });
      const bare = contentInfo(signed, { chain, withCertificates: true });
      const token = await stampOf(signed.signature, stampedBy, within);
      if (token === null) return bare;
      const unsigned = [attribute(oids.timeStampToken, token)];
      const stamped = contentInfo(signed, { chain, withCertificates: true, unsigned });
      return stamped.length <= room ? stamped : bare;
    },
  };
}

/** The installation's own stamp says nothing that its signature does not say already. */
const othersFirst = () => authorities().sort((one, other) => Number(one.isOwn) - Number(other.isOwn));

/** A token over the signature's value from the first authority that gives one; null if none does in time. */
async function stampOf(signature: Uint8Array, asked: TimeStampAuthority[], within: number): Promise<Uint8Array | null> {
  const digest = createHash('sha256').update(signature).digest();
  const deadline = AbortSignal.timeout(within);
  const late = new Promise<never>((_, reject) => {
    deadline.addEventListener('abort', () => reject(new Error(`No answer within ${within} ms.`)));
  });
  late.catch(() => undefined);
  for (const authority of asked) {
    const nonce = newNonce();
    try {
      const reply = await Promise.race([authority.stamp(buildRequest({ digest, nonce })), late]);
      return checkReply(reply, { digest, nonce, at: now() }).token;
    } catch {
      // A packet without a time stamp on its pages is as good: the record inside it has its own.
    }
  }
  return null;
}
