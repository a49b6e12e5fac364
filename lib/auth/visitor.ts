import 'server-only';
import { headers } from 'next/headers';

/**
 * Where the request comes from: the last address in X-Forwarded-For, which the nearest proxy, or without one Next
 * itself, appends. Without a proxy a visitor can invent it, and then only the limits by account hold.
 */
export async function visitorAddress(): Promise<string> {
  const forwarded = (await headers()).get('x-forwarded-for') ?? '';
  return forwarded.split(',').at(-1)?.trim().slice(0, 64) || 'unknown';
}

/** What kind of device it is, for the list of sessions. */
export async function visitorDevice(): Promise<string> {
  return deviceWords((await headers()).get('user-agent') ?? '');
}

/** @example deviceWords('Mozilla/5.0 (X11; Linux x86_64; rv:140.0) Gecko/20100101') // 'Computer' */
export function deviceWords(userAgent: string): string {
  if (/iPad|Tablet|Android(?!.*Mobile)/.test(userAgent)) return 'Tablet';
  if (/Mobile|iPhone/.test(userAgent)) return 'Phone';
  return userAgent.startsWith('Mozilla/') ? 'Computer' : 'Another program';
}
