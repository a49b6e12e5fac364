import 'server-only';
import type { EntryRow } from '@/db/models/logs';
import { findEntryByIdempotencyKey } from '@/db/queries/entries';
import type { PasskeyChallengeRow } from '@/db/queries/passkeys';
import type { PersonRow } from '@/db/models/people';
import type { Statement } from '@/lib/evidence/statement';
import { statementKey } from '@/lib/services/append-statement';
import { type CheckedSignature, checkSignature } from '@/lib/services/check-signature';
import type { SignatureAnswer } from '@/lib/services/passkey-answer';
import { wasteChallenge } from '@/lib/services/passkey-challenge';

/**
 * Checks the answer to a challenge, of which there is one try. The second of two presses finds the key's counter where
 * the first has left it; it is given the entry that the first has sealed.
 */
export async function checkOnce(options: {
  person: PersonRow;
  statement: Statement;
  answer: SignatureAnswer;
  row: PasskeyChallengeRow;
}): Promise<CheckedSignature | { first: EntryRow }> {
  const { row, ...asked } = options;
  try {
    return await checkSignature(asked);
  } catch (error) {
    const first = await findEntryByIdempotencyKey(statementKey(row.id));
    if (first !== null) return { first };
    await wasteChallenge(row);
    throw error;
  }
}
