import { expect, it } from 'vitest';
import { isPersonId } from '@/lib/domain/person-id';

it('tells a person’s id from a name', () => {
  expect(isPersonId('5c1de2b4-13aa-4a0e-8f6d-9a3c51f0d001')).toBe(true);
  for (const text of ['Imke Vandersloot', '', '5c1de2b4', '5C1DE2B4-13AA-4A0E-8F6D-9A3C51F0D001 ']) {
    expect(isPersonId(text)).toBe(false);
  }
});
