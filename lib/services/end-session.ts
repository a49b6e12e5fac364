import 'server-only';
import { write } from '@/db/index';
import { endSession, endSessions, listSessions, type PersonRow } from '@/db/queries/people';
import { isAlive } from '@/lib/auth/session-life';
import { notFound } from '@/lib/errors';
import { now } from '@/lib/ports/clock';

export interface SessionView {
  id: string;
  device: string;
  createdAt: string;
  lastSeenAt: string;
  isThisOne: boolean;
}

/** A person's living sessions, this one first. */
export async function readSessions(options: { person: PersonRow; current: string }): Promise<SessionView[]> {
  const at = now();
  const rows = await listSessions(options.person.id, at.toISOString());
  return rows
    .filter((row) => isAlive(row, at))
    .map(({ id, device, createdAt, lastSeenAt }) => ({
      id,
      device,
      createdAt,
      lastSeenAt,
      isThisOne: id === options.current,
    }))
    .sort((a, b) => Number(b.isThisOne) - Number(a.isThisOne));
}

/** Ends one of the person's sessions on the server. */
export async function endOneSession({ person, session }: { person: PersonRow; session: string }): Promise<void> {
  const at = now().toISOString();
  const isEnded = await write((transaction) => endSession({ id: session, personId: person.id, at }, { transaction }));
  if (!isEnded) throw notFound('session');
}

/** Ends all but the one the person is using. Returns how many were ended. */
export async function endOtherSessions({ person, current }: { person: PersonRow; current: string }): Promise<number> {
  const at = now().toISOString();
  return write((transaction) => endSessions({ personId: person.id, except: current, at }, { transaction }));
}
