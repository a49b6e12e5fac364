import 'server-only';
import { randomUUID } from 'node:crypto';
import { headers } from 'next/headers';
import { redirect } from 'next/navigation';
import { cache } from 'react';
import type { PersonRow, SessionRow } from '@/db/queries/people';
import { paths } from '@/lib/paths';
import { knownDeviceCookie, sessionCookie } from './cookies';
import { signInPath } from './local-path';
import { pathHeader } from './path-header';
import { readSession } from './read-session';

/** The living session of this request, asked for once however often a page needs it. */
export const currentSession = cache(async (): Promise<{ session: SessionRow; person: PersonRow } | null> => {
  const { id } = await sessionCookie();
  return id === undefined ? null : readSession(id);
});

export async function currentPerson(): Promise<PersonRow | null> {
  return (await currentSession())?.person ?? null;
}

/** For pages and actions: the session and its person, or away to the sign-in page, which leads back here. */
export async function requireSession(): Promise<{ session: SessionRow; person: PersonRow }> {
  const current = await currentSession();
  if (current === null) redirect(signInPath((await headers()).get(pathHeader)));
  return current;
}

export async function requirePerson(): Promise<PersonRow> {
  return (await requireSession()).person;
}

/** Puts a session that a use case has just begun into the cookie, and remembers the device. */
export async function keepSession(options: { sessionId: string; personId: string }): Promise<void> {
  const cookie = await sessionCookie();
  cookie.id = options.sessionId;
  await cookie.save();
  const device = await knownDeviceCookie();
  device.id ??= randomUUID();
  device.people = [options.personId, ...(device.people ?? []).filter((id) => id !== options.personId)].slice(0, 8);
  await device.save();
}

export async function forgetSession(): Promise<void> {
  (await sessionCookie()).destroy();
}

/** Sends somebody who is signed in already away from a page that is only for those who are not. */
export async function leaveIfSignedIn(): Promise<void> {
  if ((await currentPerson()) !== null) redirect(paths.start);
}
