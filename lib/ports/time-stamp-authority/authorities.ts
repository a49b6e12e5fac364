import 'server-only';
import { env } from '@/lib/env';
import { httpAuthority } from './http';
import { ownAuthority } from './own';
import type { TimeStampAuthority } from './time-stamp-authority';

/** The authorities that stamp every new checkpoint: those the steward named, else the installation's own. */
export function authorities(): TimeStampAuthority[] {
  return env.timeStampUrls.length > 0 ? env.timeStampUrls.map(httpAuthority) : [ownAuthority];
}

/** The authority of a waiting job; undefined when the steward named it once and does so no longer. */
export function authorityNamed(name: string): TimeStampAuthority | undefined {
  return [ownAuthority, ...env.timeStampUrls.map(httpAuthority)].find((authority) => authority.name === name);
}
