import { describe, expect, test } from 'vitest';
import { isFromOurselves } from '@/lib/auth/same-origin';

/** Browsers alone may set these two headers; for a request made by hand they must be put in by the test. */
function request(method: string, headers: Record<string, string>): Request {
  const made = new Request('http://localhost:3000/api/drafts', { method });
  const all = new Headers({ host: 'localhost:3000', ...headers });
  Object.defineProperty(made, 'headers', { value: all });
  return made;
}

describe('a request that may change something', () => {
  test.each([
    ['of our own page', { origin: 'http://localhost:3000', 'sec-fetch-site': 'same-origin' }, true],
    ['of our own page in an older browser', { origin: 'http://localhost:3000' }, true],
    ['of our own page without an Origin', { 'sec-fetch-site': 'same-origin' }, true],
    ['of another site', { origin: 'https://elsewhere.example', 'sec-fetch-site': 'cross-site' }, false],
    ['of another site in an older browser', { origin: 'https://elsewhere.example' }, false],
    ['of another port of the same host', { origin: 'http://localhost:3001', 'sec-fetch-site': 'same-site' }, false],
    ['of a sandboxed frame', { origin: 'null' }, false],
    [
      'of another site that claims our Origin',
      { origin: 'http://localhost:3000', 'sec-fetch-site': 'cross-site' },
      false,
    ],
    ['typed into the address bar', { 'sec-fetch-site': 'none' }, false],
    ['of a program that states nothing', {}, false],
  ])('%s: %o is allowed: %s', (_what, headers, isAllowed) => {
    expect(isFromOurselves(request('POST', headers))).toBe(isAllowed);
    expect(isFromOurselves(request('DELETE', headers))).toBe(isAllowed);
  });

  test('reading is open to every site’s links', () => {
    expect(isFromOurselves(request('GET', { 'sec-fetch-site': 'cross-site' }))).toBe(true);
  });
});
