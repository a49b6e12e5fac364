import { describe, expect, test } from 'vitest';
import { dynamicPagePolicy, garagePolicy, pageHeaders } from '@/lib/auth/page-headers';

const directives = (policy: string) =>
  Object.fromEntries(
    policy.split('; ').map((directive) => {
      const [name = '', ...values] = directive.split(' ');
      return [name, values];
    }),
  );

describe('the policy of a page', () => {
  test('lets only scripts with this request’s nonce run', () => {
    const policy = directives(dynamicPagePolicy({ nonce: 'bm9uY2U=', isDevelopment: false }));
    expect(policy['script-src']).toEqual(["'self'", "'nonce-bm9uY2U='", "'strict-dynamic'"]);
    expect(policy['style-src-elem']).toEqual(["'self'", "'nonce-bm9uY2U='"]);
  });

  test('allows eval in development only', () => {
    expect(dynamicPagePolicy({ nonce: 'a', isDevelopment: true })).toContain("'unsafe-eval'");
    expect(dynamicPagePolicy({ nonce: 'a', isDevelopment: false })).not.toContain("'unsafe-eval'");
  });

  test('of the offline shell names its inline scripts by hash and allows no other', () => {
    const policy = directives(garagePolicy({ scriptHashes: ['sha256-abc', "'sha256-def'"], isDevelopment: false }));
    expect(policy['script-src']).toEqual(["'self'", "'sha256-abc'", "'sha256-def'"]);
    expect(directives(garagePolicy({ scriptHashes: [], isDevelopment: false }))['script-src']).toEqual(["'self'"]);
  });

  test.each([
    ['of a page', dynamicPagePolicy({ nonce: 'a', isDevelopment: false })],
    ['of the offline shell', garagePolicy({ scriptHashes: ['sha256-abc'], isDevelopment: false })],
  ])('%s allows no plug-in, no other base, no frame around it and no foreign form target', (_what, policy) => {
    const found = directives(policy);
    expect(found['object-src']).toEqual(["'none'"]);
    expect(found['base-uri']).toEqual(["'none'"]);
    expect(found['frame-ancestors']).toEqual(["'none'"]);
    expect(found['form-action']).toEqual(["'self'"]);
    expect(found['default-src']).toEqual(["'self'"]);
    expect(found['script-src']).not.toContain("'unsafe-inline'");
  });

  test('asks for TLS only where the installation has it', () => {
    expect(pageHeaders({ pathname: '/account', isSecure: true })['strict-transport-security']).toBe('max-age=63072000');
    expect(pageHeaders({ pathname: '/account', isSecure: false })).not.toHaveProperty('strict-transport-security');
  });

  test('keeps an address with a secret in it from every other page', () => {
    const headers = pageHeaders({ pathname: '/reset-password/abc', isSecure: false });
    expect(headers['referrer-policy']).toBe('strict-origin');
    expect(headers['x-robots-tag']).toBe('noindex');
    expect(pageHeaders({ pathname: '/account', isSecure: false })['referrer-policy']).toBe('same-origin');
  });
});
