import 'server-only';
import { randomUUID } from 'node:crypto';
import { write } from '@/db/index';
import { findPersonByEmail, insertPerson, removeDeadMailTokens, type PersonRow } from '@/db/queries/people';
import { mintMailToken } from '@/lib/auth/mail-token';
import { confirmEmailMail, knownAccountMail } from '@/lib/auth/mails';
import { hashPassword } from '@/lib/auth/password';
import { passwordRefusal } from '@/lib/auth/password-rules';
import { countAttempt, mailLimits } from '@/lib/auth/throttle';
import { invalidInput } from '@/lib/errors';
import { now } from '@/lib/ports/clock';
import { sendMail } from '@/lib/ports/mail';

/** What a confirmation link carries: whoever follows it confirms this name and this password, no earlier ones. */
export interface SignUpDetail extends Preferences {
  name: string;
  passwordHash: string;
}

export type Preferences = Pick<PersonRow, 'distanceUnit' | 'volumeUnit' | 'torqueUnit' | 'timeZone'>;

/**
 * Asks the owner of an address to confirm it. Known or not, the address gets one mail, and the caller the same answer
 * after the same work: hashing, one transaction, one mail.
 */
export async function signUp(options: {
  email: string;
  name: string;
  password: string;
  preferences: Preferences;
  /** Where the request comes from. */
  address: string;
}): Promise<void> {
  const { email, name, password, preferences, address } = options;
  const refusal = passwordRefusal(password, { email, name });
  if (refusal !== null) throw invalidInput({ password: refusal });
  await countAttempt(mailLimits('sign-up', { email, address }));

  const passwordHash = await hashPassword(password);
  const at = now().toISOString();
  const mail = await write(async (transaction) => {
    await removeDeadMailTokens(at, { transaction });
    const known = await findPersonByEmail(email, { transaction });
    if (known !== null && known.emailConfirmedAt !== null) {
      const token = await mintMailToken({ purpose: 'reset-password', personId: known.id }, { transaction });
      return knownAccountMail(email, token);
    }
    const personId = known?.id ?? randomUUID();
    if (known === null)
      await insertPerson({ ...unconfirmed(personId, at), email, name, ...preferences }, { transaction });
    const detail: SignUpDetail = { name, passwordHash, ...preferences };
    const token = await mintMailToken(
      { purpose: 'confirm-email', personId, detail: JSON.stringify(detail) },
      { transaction },
    );
    return confirmEmailMail(email, token);
  });
  await sendMail(mail);
}

/** The row keeps the address; name, password and the rest become so when the link is followed. */
function unconfirmed(id: string, createdAt: string) {
  return { id, passwordHash: '', emailConfirmedAt: null, isSteward: false, createdAt };
}
