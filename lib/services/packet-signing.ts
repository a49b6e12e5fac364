import 'server-only';
import { WitnessmarkError } from '@/lib/errors';
import { packetCertificate } from '@/lib/ports/packet-certificate';
import { pageSigner, type PageSigner } from '@/lib/ports/sign-pages';

/** Signs the pages of one packet. Refuses with `key-unusable` while the packet certificate cannot be used. */
export function packetSigner(): PageSigner {
  return usable(
    () => pageSigner(),
    'The packet cannot be signed for now: this server’s packet certificate cannot be used. Tell the steward, then ask for it again.',
  );
}

/** PEM of the root behind the certificate that signs packets now. A packet carries the one it was signed under. */
export function packetRoot(): string {
  return usable(
    () => packetCertificate().root.toString(),
    'The packet root cannot be given for now: this server’s packet certificate cannot be used. Tell the steward.',
  );
}

/** Why no packet can be signed, as a sentence for the steward; null when all is well. Makes the first certificate. */
export function packetSigningTrouble(): string | null {
  try {
    packetCertificate();
    return null;
  } catch (error) {
    return error instanceof Error ? error.message : String(error);
  }
}

function usable<T>(work: () => T, sentence: string): T {
  try {
    return work();
  } catch (cause) {
    const log = cause instanceof Error ? cause.message : String(cause);
    throw new WitnessmarkError('key-unusable', sentence, { log, cause });
  }
}
