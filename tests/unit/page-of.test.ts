import { describe, expect, it } from 'vitest';
import { pageOf } from '@/lib/page-of';

const list = (length: number) => Array.from({ length }, (_, index) => index);

describe('pageOf', () => {
  it.each([
    [24, 24, undefined],
    [25, 25, undefined],
    [26, 25, '/record?page=2'],
  ])('shows of %i lines %i on the first page', (length, shown, older) => {
    const page = pageOf(list(length), {}, '/record');
    expect(page.shown).toHaveLength(shown);
    expect(page.older).toBe(older);
    expect(page.newer).toBeUndefined();
  });
  it('leads back to the first page by its plain address', () => {
    const page = pageOf(list(30), { page: '2' }, '/record');
    expect(page).toEqual({ shown: [25, 26, 27, 28, 29], words: '26 to 30 of 30', newer: '/record', older: undefined });
  });
  it.each([
    ['0', 0],
    ['-1', 0],
    ['two', 0],
    ['999999999999', 0],
    ['99', 25],
  ])('takes page %s as the nearest there is', (page, first) => {
    expect(pageOf(list(30), { page }, '/record').shown[0]).toBe(first);
  });
  it('takes a repeated parameter as none', () => {
    expect(pageOf(list(30), { page: ['2', '3'] }, '/record').shown[0]).toBe(0);
  });
});
