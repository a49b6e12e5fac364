import 'server-only';
import { write } from '@/db/index';
import { keyNamesOfLogs } from '@/db/queries/logs';
import { env } from '@/lib/env';
import { fingerprint, verifierKey } from '@/lib/evidence/checkpoint';
import { hasSigningKeyFile, nextSigningKey } from '@/lib/ports/signing-key';
import { keyTrouble, publish, publishedKeys } from '@/lib/services/log-keys';

export interface RotatedKey {
  verifierKey: string;
  fingerprint: string;
  /** The fingerprint of the key before it; null if none was ever published. */
  before: string | null;
}

/**
 * Makes a new signing key and publishes it before the first note is signed with it. It runs as one write: no process
 * seals meanwhile, and a running server signs its next seal with the new key.
 *
 * The old private key is not kept. Whatever it signed is checked with its public half, which stays published; all that
 * the private half could still do is to sign what was never sealed.
 *
 * Throws, having changed nothing, if the present key cannot be used: it may only need to be put back. `isOldKeyLost`
 * says that it cannot.
 */
export async function rotateKey(options: { isOldKeyLost?: boolean } = {}): Promise<RotatedKey> {
  return write(async (transaction) => {
    const trouble = keyTrouble();
    if (trouble !== null && options.isOldKeyLost !== true) throw new Error(`No new key was made. ${trouble}`);
    if (trouble !== null && hasSigningKeyFile()) {
      throw new Error(`No new key was made: there is a key file. Move it away first if it is of no use. ${trouble}`);
    }
    const before = publishedKeys()[0]?.fingerprint ?? null;
    const { key, use } = nextSigningKey();
    for (const name of new Set([...(await keyNamesOfLogs({ transaction })), env.origin])) {
      publish(verifierKey(name, key.publicKey));
    }
    use();
    return { verifierKey: verifierKey(env.origin, key.publicKey), fingerprint: fingerprint(key.publicKey), before };
  });
}
