import { readFileSync } from 'node:fs';
import path from 'node:path';
import { NextResponse, type NextRequest } from 'next/server';
import { dynamicPagePolicy, garagePolicy, pageHeaders } from '@/lib/auth/page-headers';
import { pathHeader } from '@/lib/auth/path-header';

const isDevelopment = process.env.NODE_ENV === 'development';
let garageHashes: string[] | undefined;

/** Sets what every page is sent with. It decides nothing about who may see it: each page and action does that. */
export function proxy(request: NextRequest) {
  const { pathname, search } = request.nextUrl;
  const isSecure = process.env.WITNESSMARK_URL?.startsWith('https:') === true;

  if (pathname === '/garage' || pathname.startsWith('/garage/')) {
    const response = NextResponse.next();
    return withHeaders(response, { ...pageHeaders({ pathname, isSecure }), ...garageHeaders() });
  }

  const nonce = btoa(String.fromCharCode(...crypto.getRandomValues(new Uint8Array(16))));
  const policy = dynamicPagePolicy({ nonce, isDevelopment });
  const headers = new Headers(request.headers);
  // Next reads the nonce from the request's policy and puts it on its own scripts.
  headers.set('content-security-policy', policy);
  headers.set('x-nonce', nonce);
  headers.set(pathHeader, pathname + search);
  const response = NextResponse.next({ request: { headers } });
  return withHeaders(response, {
    ...pageHeaders({ pathname, isSecure }),
    'content-security-policy': policy,
    'cache-control': 'private, no-store',
  });
}

/** The offline shell is built once, so its inline scripts are named by their hashes. */
function garageHeaders(): Record<string, string> {
  if (isDevelopment) return { 'content-security-policy': garagePolicy({ isDevelopment, scriptHashes: [] }) };
  garageHashes ??= readGarageHashes();
  return { 'content-security-policy': garagePolicy({ isDevelopment, scriptHashes: garageHashes }) };
}

function readGarageHashes(): string[] {
  const folder = process.env.WITNESSMARK_BUILD ?? '.next';
  const file = path.resolve(/* turbopackIgnore: true */ folder, 'garage-csp.json');
  try {
    return (JSON.parse(readFileSync(file, 'utf8')) as { scriptHashes: string[] }).scriptHashes;
  } catch (error) {
    // Without hashes no inline script runs: the page stays still rather than open.
    console.error(
      'garage-csp.json cannot be read, so the garage page will not start. Build with `npm run build`.',
      error,
    );
    return [];
  }
}

function withHeaders(response: NextResponse, headers: Record<string, string>): NextResponse {
  for (const [name, value] of Object.entries(headers)) response.headers.set(name, value);
  return response;
}

export const config = {
  // Not before /api: a proxy cuts bodies over 10 MB short without a word, and routes set their own headers.
  matcher: ['/((?!api/|_next/static|_next/image|[^/]+\\.(?:js|css|map|png|svg|ico|txt|webmanifest|woff2?|ttf)$).*)'],
};
