import 'server-only';
import { write } from '@/db/index';
import { endSessions, findPerson, spendMailTokens, updatePerson } from '@/db/queries/people';
import { deadLink, readMailToken, spendMailToken } from '@/lib/auth/mail-token';
import { passwordChangedMail } from '@/lib/auth/mails';
import { hashPassword } from '@/lib/auth/password';
import { passwordRefusal } from '@/lib/auth/password-rules';
import { countAttempt, tokenLimits } from '@/lib/auth/throttle';
import { invalidInput } from '@/lib/errors';
import { now } from '@/lib/ports/clock';
import { sendMail } from '@/lib/ports/mail';

/** Puts another password in place of a forgotten one, once per link, and ends every session of the account. */
export async function resetPassword(options: { token: string; password: string; address: string }): Promise<void> {
  const { token, password, address } = options;
  await countAttempt(tokenLimits(address));
  const row = await readMailToken(token, 'reset-password');
  const person = row === null ? null : await findPerson(row.personId);
  if (person === null) throw deadLink();
  const refusal = passwordRefusal(password, person);
  if (refusal !== null) throw invalidInput({ password: refusal });

  const passwordHash = await hashPassword(password);
  const at = now().toISOString();
  await write(async (transaction) => {
    await spendMailToken(token, 'reset-password', { transaction });
    await updatePerson(person.id, { passwordHash }, { transaction });
    await spendMailTokens(person.id, 'reset-password', at, { transaction });
    await endSessions({ personId: person.id, at }, { transaction });
  });
  await sendMail(passwordChangedMail(person.email));
}
