import 'server-only';
import { getIronSession, type IronSession, type SessionOptions } from 'iron-session';
import { cookies } from 'next/headers';
import { env } from '@/lib/env';
import { longestDays } from './session-life';
import { sessionKey } from './session-key';

const secondsInDay = 24 * 60 * 60;

/** A `__Host-` name is only accepted over TLS, for the whole host, without a domain; plain http needs a plain name. */
export const cookieName = (name: string) => (env.isSecure ? `__Host-${name}` : name);

export function cookieOptions(name: string, days: number): SessionOptions {
  return {
    cookieName: cookieName(name),
    password: sessionKey(),
    ttl: days * secondsInDay,
    cookieOptions: { httpOnly: true, secure: env.isSecure, sameSite: 'lax', path: '/' },
  };
}

/** The cookie holds an id and nothing else; whether it still counts is decided by its row. */
export const sessionCookieOptions = () => cookieOptions('witnessmark-session', longestDays);

export function sessionCookie(): Promise<IronSession<{ id?: string }>> {
  return openCookie(sessionCookieOptions());
}

/** Outlives a session: this device signed in as these people before, so guesses made elsewhere do not slow it down. */
export function knownDeviceCookie(): Promise<IronSession<{ id?: string; people?: string[] }>> {
  return openCookie(cookieOptions('witnessmark-device', 365));
}

/** A cookie that was not sealed here, or is damaged, counts as none. */
export async function openCookie<T extends object>(options: SessionOptions): Promise<IronSession<T>> {
  const store = await cookies();
  try {
    return await getIronSession<T>(store, options);
  } catch {
    const blank = { get: () => undefined, set: store.set.bind(store) as typeof store.set };
    return getIronSession<T>(blank, options);
  }
}
