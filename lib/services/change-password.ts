import 'server-only';
import { write } from '@/db/index';
import { endSessions, spendMailTokens, updatePerson, type PersonRow } from '@/db/queries/people';
import { passwordChangedMail } from '@/lib/auth/mails';
import { hashPassword, isPassword } from '@/lib/auth/password';
import { passwordRefusal } from '@/lib/auth/password-rules';
import { countAttempt, forgiveAttempts, passwordAgainLimits } from '@/lib/auth/throttle';
import { invalidInput } from '@/lib/errors';
import { now } from '@/lib/ports/clock';
import { sendMail } from '@/lib/ports/mail';

/** Asks for the present password first, then ends every session but the one it is changed from. */
export async function changePassword(options: {
  person: PersonRow;
  sessionId: string;
  password: string;
  newPassword: string;
}): Promise<void> {
  const { person, sessionId, password, newPassword } = options;
  const refusal = passwordRefusal(newPassword, person);
  if (refusal !== null) throw invalidInput({ newPassword: refusal });
  const limits = passwordAgainLimits(person.id);
  await countAttempt(limits);
  if (!(await isPassword(person.passwordHash, password))) {
    throw invalidInput({ password: 'This is not your present password.' });
  }
  const passwordHash = await hashPassword(newPassword);
  const at = now().toISOString();
  await write(async (transaction) => {
    await updatePerson(person.id, { passwordHash }, { transaction });
    await spendMailTokens(person.id, 'reset-password', at, { transaction });
    await endSessions({ personId: person.id, except: sessionId, at }, { transaction });
  });
  await forgiveAttempts(limits);
  await sendMail(passwordChangedMail(person.email));
}
