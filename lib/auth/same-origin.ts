import 'server-only';
import { env } from '@/lib/env';

const safeMethods = new Set(['GET', 'HEAD', 'OPTIONS']);

/**
 * Whether a request that may change something comes from a page of this installation. Browsers state it in
 * Sec-Fetch-Site (over TLS or on localhost) and in Origin; a request with neither is not from a page.
 */
export function isFromOurselves(request: Request): boolean {
  if (safeMethods.has(request.method)) return true;
  const site = request.headers.get('sec-fetch-site');
  if (site !== null && site !== 'same-origin') return false;
  const origin = request.headers.get('origin');
  if (origin === null) return site === 'same-origin';
  if (origin === new URL(env.url).origin) return true;
  return URL.canParse(origin) && new URL(origin).host === request.headers.get('host');
}
