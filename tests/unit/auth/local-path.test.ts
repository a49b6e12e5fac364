import { describe, expect, test } from 'vitest';
import { localPath, signInPath } from '@/lib/auth/local-path';

describe('where signing in may lead', () => {
  test.each([
    ['/account'],
    ['/machines/6f1b4a7e/record/12'],
    ['/garage#worksheet/6f1b4a7e'],
    ['/steward/mail?page=2'],
    ['/countersign/answer/6f1b4a7e'],
  ])('%s is a page of ours', (path) => {
    expect(localPath(path)).toBe(path);
  });

  test.each([
    ['another host', '//elsewhere.example/account'],
    ['another host behind backslashes', '/\\elsewhere.example/account'],
    ['a whole address', 'https://elsewhere.example/account'],
    ['a script', 'javascript:alert(1)'],
    ['a tab in front of the host', '/\t/elsewhere.example'],
    ['a line break', '/account\r\nset-cookie: a=b'],
    ['an encoded second slash after a known page', '/account/..//elsewhere.example'],
    ['dots that climb out of a known page', '/account/../sign-out'],
    ['encoded dots that climb out of a known page', '/account/%2e%2e/api/garage'],
    ['a page that only begins like one of ours', '/accounts'],
    ['an API route', '/api/garage'],
    ['the sign-in page, which would go round in a ring', '/sign-in?next=/account'],
    ['a user name before the host', '/@elsewhere.example'],
    ['nothing', ''],
    ['no text', ['/account', '/start']],
  ])('%s is refused', (_what, path) => {
    expect(localPath(path)).toBeNull();
  });

  test('500 characters are allowed and 501 are not', () => {
    const path = (length: number) => `/machines/${'a'.repeat(length - '/machines/'.length)}`;
    expect([499, 500, 501].map((length) => localPath(path(length)) !== null)).toEqual([true, true, false]);
  });

  test('the sign-in page carries a page of ours and drops any other', () => {
    expect(signInPath('/account?a=b')).toBe('/sign-in?next=%2Faccount%3Fa%3Db');
    expect(signInPath('//elsewhere.example')).toBe('/sign-in');
    expect(signInPath(null)).toBe('/sign-in');
  });
});
