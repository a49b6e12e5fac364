import 'server-only';
import { write } from '@/db/index';
import { endSession } from '@/db/queries/people';
import { now } from '@/lib/ports/clock';

/** Ends the session on the server: a copy of its cookie is worth nothing afterwards. */
export async function signOut({ sessionId, personId }: { sessionId: string; personId: string }): Promise<void> {
  await write((transaction) => endSession({ id: sessionId, personId, at: now().toISOString() }, { transaction }));
}
