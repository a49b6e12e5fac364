import 'server-only';
import { write } from '@/db/index';
import { findPersonByEmail, removeDeadMailTokens } from '@/db/queries/people';
import { mintMailToken } from '@/lib/auth/mail-token';
import { resetPasswordMail } from '@/lib/auth/mails';
import { countAttempt, mailLimits } from '@/lib/auth/throttle';
import { now } from '@/lib/ports/clock';
import { sendMail } from '@/lib/ports/mail';

/** Throws `too-many-attempts`; says nothing about whether there is such an account. */
export async function admitPasswordReset(options: { email: string; address: string }): Promise<void> {
  await countAttempt(mailLimits('reset', options));
}

/**
 * Mails a link to the account's owner, if there is such an account. Runs after the answer has gone out: an unknown
 * address gets no mail, and the time that takes would tell.
 */
export async function requestPasswordReset({ email }: { email: string }): Promise<void> {
  const person = await findPersonByEmail(email);
  if (person === null || person.emailConfirmedAt === null) return;
  const token = await write(async (transaction) => {
    await removeDeadMailTokens(now().toISOString(), { transaction });
    return mintMailToken({ purpose: 'reset-password', personId: person.id }, { transaction });
  });
  await sendMail(resetPasswordMail(email, token));
}
