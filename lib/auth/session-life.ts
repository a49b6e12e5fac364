import type { SessionRow } from '@/db/models/people';

const millisecondsInDay = 24 * 60 * 60 * 1000;
export const idleDays = 14;
export const longestDays = 90;
/** How stale `lastSeenAt` may get before a visit writes it again. */
export const seenAgainAfterMilliseconds = 5 * 60 * 1000;

export const sessionEnd = (start: Date) => new Date(start.getTime() + longestDays * millisecondsInDay);

/**
 * Whether a session still counts: not ended, seen within 14 days, and begun within 90.
 *
 * @example isAlive({ endedAt: null, expiresAt, lastSeenAt }, now())
 */
export function isAlive(session: Pick<SessionRow, 'endedAt' | 'expiresAt' | 'lastSeenAt'>, at: Date): boolean {
  return (
    session.endedAt === null &&
    at.getTime() < Date.parse(session.expiresAt) &&
    at.getTime() - Date.parse(session.lastSeenAt) < idleDays * millisecondsInDay
  );
}

export function shouldTouch(session: Pick<SessionRow, 'lastSeenAt'>, at: Date): boolean {
  return at.getTime() - Date.parse(session.lastSeenAt) >= seenAgainAfterMilliseconds;
}
