import 'server-only';
import { write } from '@/db/index';
import { findPerson, spendMailTokens, updatePerson } from '@/db/queries/people';
import { deadLink, spendMailToken } from '@/lib/auth/mail-token';
import { countAttempt, tokenLimits } from '@/lib/auth/throttle';
import { now } from '@/lib/ports/clock';
import { appointSteward } from './appoint-steward';
import type { SignUpDetail } from './sign-up';

/** Makes the account of a sign-up usable. Throws `gone` for a link that was used, is too old, or never was. */
export async function confirmEmail({ token, address }: { token: string; address: string }): Promise<void> {
  await countAttempt(tokenLimits(address));
  const at = now().toISOString();
  await write(async (transaction) => {
    const { personId, detail } = await spendMailToken(token, 'confirm-email', { transaction });
    const person = await findPerson(personId, { transaction });
    if (person === null || person.emailConfirmedAt !== null || detail === null) throw deadLink();
    const chosen = JSON.parse(detail) as SignUpDetail;
    await updatePerson(personId, { ...chosen, emailConfirmedAt: at }, { transaction });
    await spendMailTokens(personId, 'confirm-email', at, { transaction });
  });
  await appointSteward();
}
