/** Directives every page shares. */
const common = {
  'default-src': "'self'",
  'img-src': "'self' blob: data:",
  'font-src': "'self'",
  'connect-src': "'self'",
  'worker-src': "'self'",
  'manifest-src': "'self'",
  'object-src': "'none'",
  'base-uri': "'none'",
  'form-action': "'self'",
  'frame-ancestors': "'none'",
} as const;

const asText = (directives: Record<string, string>) =>
  Object.entries(directives)
    .map(([name, value]) => `${name} ${value}`)
    .join('; ');

/**
 * For pages rendered at each request. Only scripts that carry this request's nonce run, and what they load. Style
 * attributes are allowed because drawings (rule, mark) place things by figures; style elements are not.
 */
export function dynamicPagePolicy({ nonce, isDevelopment }: { nonce: string; isDevelopment: boolean }): string {
  // React's messages in development use eval.
  const evaluated = isDevelopment ? " 'unsafe-eval'" : '';
  return asText({
    ...common,
    'script-src': `'self' 'nonce-${nonce}' 'strict-dynamic'${evaluated}`,
    'style-src-elem': isDevelopment ? "'self' 'unsafe-inline'" : `'self' 'nonce-${nonce}'`,
    'style-src-attr': "'unsafe-inline'",
  });
}

/** For the offline shell, which is built once: its inline scripts are named by `'sha256-…'`. */
export function garagePolicy(options: { scriptHashes: string[]; isDevelopment: boolean }): string {
  const { scriptHashes, isDevelopment } = options;
  const inline = isDevelopment ? "'unsafe-inline' 'unsafe-eval'" : scriptHashes.map(quoted).join(' ');
  return asText({
    ...common,
    'script-src': `'self' ${inline}`.trim(),
    'style-src-elem': isDevelopment ? "'self' 'unsafe-inline'" : "'self'",
    'style-src-attr': "'unsafe-inline'",
  });
}

const quoted = (hash: string) => (hash.startsWith("'") ? hash : `'${hash}'`);

/** Addresses with a secret in them: not even the own site is told where the visitor came from. */
const secretPath = /^\/(?:confirm-email|reset-password|countersign|v|view|keep)\//;

export function pageHeaders({ pathname, isSecure }: { pathname: string; isSecure: boolean }): Record<string, string> {
  return {
    'x-content-type-options': 'nosniff',
    'referrer-policy': referrerPolicy(pathname),
    'permissions-policy': 'camera=(self), microphone=(), geolocation=(), payment=(), usb=(), browsing-topics=()',
    'cross-origin-opener-policy': 'same-origin',
    'x-frame-options': 'DENY',
    ...(secretPath.test(pathname) ? { 'x-robots-tag': 'noindex' } : {}),
    ...(isSecure ? { 'strict-transport-security': 'max-age=63072000' } : {}),
  };
}

/**
 * A swap address has no form and says nothing at all. On other pages with a secret in their address `strict-origin`
 * keeps the Origin header, which `no-referrer` would blank and forms are checked by.
 */
function referrerPolicy(pathname: string): string {
  if (/^\/(v|countersign)\/[A-Za-z0-9_-]+$/.test(pathname)) return 'no-referrer';
  return secretPath.test(pathname) ? 'strict-origin' : 'same-origin';
}
