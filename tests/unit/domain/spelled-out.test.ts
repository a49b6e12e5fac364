import { describe, expect, it } from 'vitest';
import { namesAnyOf, numbersAnyOf } from '@/lib/domain/spelled-out';

describe('a name spelled out in a value', () => {
  const isNaming = namesAnyOf(['Imke Vandersloot', 'J. (Joost) Ó Briain']);
  it.each([
    { text: 'Held by Imke Vandersloot.' },
    { deep: [{ a: ['IMKE  VANDERSLOOT'] }] },
    'imke\nvandersloot',
    'by J. (Joost) Ó Briain, twice',
    'by J. (Joost) O\u0301 Briain'.normalize('NFC'),
  ])('is found wherever it stands: %j', (value) => {
    expect(isNaming(value)).toBe(true);
  });
  it.each(['Imke', 'Imke Vandersloots', 'PreImke Vandersloot', 12, null, {}, 'Engine oil'])(
    'is not found in anything else: %j',
    (value) => {
      expect(isNaming(value)).toBe(false);
    },
  );
  it('is never found where there are no names', () => {
    expect(namesAnyOf([])('anything')).toBe(false);
    expect(namesAnyOf(['', '  '])('anything')).toBe(false);
  });
});

describe('a number spelled out in a value', () => {
  const isIdentifying = numbersAnyOf(['AAACRVSR3NA000417', 'SR18']);
  it.each(['VIN AAACRVSR3NA000417', 'aaacrvsr3na000417', { text: 'AAACRVSR3 NA-000417' }])('is found: %j', (value) => {
    expect(isIdentifying(value)).toBe(true);
  });
  it('is not looked for when it is so short that it would be found by chance', () => {
    expect(isIdentifying('SR18 and other words')).toBe(false);
  });
});
