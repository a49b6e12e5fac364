import 'server-only';
import { write } from '@/db/index';
import { findPersonByEmail, updatePerson } from '@/db/queries/people';
import { env } from '@/lib/env';

/**
 * Makes the account named by WITNESSMARK_STEWARD the steward, once its address is confirmed. Nobody becomes steward in
 * the app: who can set the environment runs the installation anyway.
 */
export async function appointSteward(): Promise<void> {
  if (env.steward === undefined) return;
  const person = await findPersonByEmail(env.steward);
  if (person === null || person.emailConfirmedAt === null || person.isSteward) return;
  await write((transaction) => updatePerson(person.id, { isSteward: true }, { transaction }));
}
