import 'server-only';
import { countCheckpoints } from '@/db/queries/logs';
import type { Transaction } from '@/db/index';
import { logsWithIssuedCheckpoint } from '@/lib/ports/issued-checkpoints';
import { hasSigningKeyFile, makeSigningKey } from '@/lib/ports/signing-key';
import { publishedKeys } from '@/lib/services/log-keys';

/**
 * Makes the installation's first signing key, once. Where anything was ever signed, in the database, beside it, or by a
 * key that is published, a missing key is not replaced: that would be another installation under the same name.
 *
 * @returns whether one was made
 */
export async function prepareSigningKey(options: { transaction?: Transaction } = {}): Promise<boolean> {
  if (hasSigningKeyFile()) return false;
  const hasSigned =
    publishedKeys().length > 0 ||
    (await logsWithIssuedCheckpoint()).length > 0 ||
    (await countCheckpoints(options)) > 0;
  if (hasSigned) return false;
  makeSigningKey();
  publishedKeys();
  return true;
}
