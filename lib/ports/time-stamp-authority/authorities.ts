import 'server-only';
import { env } from '@/lib/env';
import { httpAuthority } from './http';
import { ownAuthority } from './own';
import type { TimeStampAuthority } from './time-stamp-authority';

/** The authorities that stamp every new checkpoint: those the steward named, or else the installation's own alone. */
export function authorities(): TimeStampAuthority[] {
  const named = [...(env.doesOwnAuthorityStamp ? [ownAuthority] : []), ...env.timeStampUrls.map(httpAuthority)];
  // One address with two passwords is one authority.
  return [...new Map(named.map((authority) => [authority.name, authority])).values()];
}

/** The authority of a waiting job; undefined when the steward named it once and does so no longer. */
export function authorityNamed(name: string): TimeStampAuthority | undefined {
  return authorities().find((authority) => authority.name === name);
}
