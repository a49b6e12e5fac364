import 'server-only';
import { write } from '@/db/index';
import { findPerson, findSession, touchSession, type PersonRow, type SessionRow } from '@/db/queries/people';
import { now } from '@/lib/ports/clock';
import { isAlive, shouldTouch } from './session-life';

/** The session and its person, if the session is alive; marks it as seen every few minutes. */
export async function readSession(id: string): Promise<{ session: SessionRow; person: PersonRow } | null> {
  const session = await findSession(id);
  const at = now();
  if (session === null || !isAlive(session, at)) return null;
  const person = await findPerson(session.personId);
  if (person === null) return null;
  if (shouldTouch(session, at)) {
    await write((transaction) => touchSession(session.id, at.toISOString(), { transaction }));
  }
  return { session, person };
}
