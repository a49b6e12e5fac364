import { describe, expect, test } from 'vitest';
import { idleDays, isAlive, longestDays, sessionEnd, shouldTouch } from '@/lib/auth/session-life';

const day = 24 * 60 * 60 * 1000;
const start = new Date('2025-03-01T12:00:00.000Z');
const after = (milliseconds: number) => new Date(start.getTime() + milliseconds);
const begun = { endedAt: null, lastSeenAt: start.toISOString(), expiresAt: sessionEnd(start).toISOString() };

describe('a session', () => {
  test('lives 14 idle days, and not a millisecond longer', () => {
    const at = (milliseconds: number) => isAlive(begun, after(idleDays * day + milliseconds));
    expect([at(-1), at(0), at(1)]).toEqual([true, false, false]);
  });

  test('lives 90 days however often it is seen', () => {
    const at = (milliseconds: number) => {
      const moment = after(longestDays * day + milliseconds);
      return isAlive({ ...begun, lastSeenAt: moment.toISOString() }, moment);
    };
    expect([at(-1), at(0), at(1)]).toEqual([true, false, false]);
  });

  test('is dead once it was ended', () => {
    expect(isAlive(begun, start)).toBe(true);
    expect(isAlive({ ...begun, endedAt: start.toISOString() }, start)).toBe(false);
  });

  test('is marked as seen every five minutes at most', () => {
    const fiveMinutes = 5 * 60 * 1000;
    expect([-1, 0, 1].map((more) => shouldTouch(begun, after(fiveMinutes + more)))).toEqual([false, true, true]);
  });
});
