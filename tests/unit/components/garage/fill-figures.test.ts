import { describe, expect, it } from 'vitest';
import {
  fillTotal,
  judgeFill,
  offeredVolumes,
  pourSentence,
  readAmount,
  specifiedFor,
} from '@/components/worksheet/fill-figures';
import type { FluidPoint } from '@/lib/evidence/format';

const ounces = (amount: string) => ({ amount, unit: '[foz_us]' }) as const;
const primary: FluidPoint = {
  point: 'primary', title: 'Primary chaincase', wetFill: [ounces('30'), { amount: '0.89', unit: 'L' }],
  dryFill: [ounces('38')], source: { kind: 'common-practice' },
}; // prettier-ignore

describe('what has gone in', () => {
  it('is the exact sum of first fill and top-ups in the first one’s unit, decimal comma or point', () => {
    const amounts = [
      { id: 'a', amount: '4,25', unit: '[qt_us]' },
      { id: 'b', amount: '8', unit: '[foz_us]' },
    ] as const;
    // 32 US fl oz to the US quart (NIST Handbook 44, appendix C): 8 fl oz = 0.25 qt.
    expect(fillTotal(amounts)).toEqual({ amount: '4.5', unit: '[qt_us]' });
  });
  it('leaves out what cannot be read yet, and is absent before the first amount', () => {
    expect(
      fillTotal([
        { id: 'a', amount: '30', unit: '[foz_us]' },
        { id: 'b', amount: '' },
      ]),
    ).toEqual(ounces('30'));
    expect(fillTotal([{ id: 'a', amount: '30' }])).toBeUndefined();
  });
  it.each(['-1', '0', 'x'])('does not take %s for an amount', (amount) => {
    expect(readAmount({ amount, unit: 'mL' })).toBeUndefined();
  });
});

describe('the specified amount', () => {
  it('is the one printed in the fill’s own unit', () => {
    expect(specifiedFor(primary, 'wet', 'L')).toEqual({ amount: '0.89', unit: 'L' });
  });
  it('is the first printed one for another unit of volume', () => {
    expect(specifiedFor(primary, 'wet', 'mL')).toEqual(ounces('30'));
  });
  it('is the dry fill’s for a dry fill, and none where none is printed', () => {
    expect(specifiedFor(primary, 'dry', '[foz_us]')).toEqual(ounces('38'));
    expect(specifiedFor(undefined, 'wet', 'mL')).toBeUndefined();
  });
});

describe('a fill beside its specification', () => {
  // 5 % of 30 US fl oz is 1.5: the ends are 28.5 and 31.5. Common practice, no source.
  it.each([
    ['28.49', 'less'], ['28.5', 'near'], ['28.51', 'near'], ['30', 'as specified'], ['31.49', 'near'], ['31.5', 'near'],
    ['31.51', 'more'],
  ])('of %s for 30 is %s', (amount, judged) => {
    expect(judgeFill(ounces(amount), ounces('30'))).toBe(judged);
  }); // prettier-ignore
  it('is compared exactly in another unit', () => {
    expect(judgeFill({ amount: '0.9375', unit: '[qt_us]' }, ounces('30'))).toBe('as specified');
  });
});

describe('the bottle sentence', () => {
  const lot = { seq: 14, containerSize: ounces('32') };
  it.each([
    ['30', 'From a 32 US fl oz bottle: pour off 2 US fl oz, then all of it. 2 US fl oz stay in lot 14.'],
    ['32', 'From a 32 US fl oz bottle: all of it.'],
    [
      '33',
      '1 whole bottle of 32 US fl oz; from the next pour off 31 US fl oz, then all of it. 31 US fl oz stay in lot 14.',
    ],
    ['64', '2 whole bottles of 32 US fl oz.'],
  ])('for %s US fl oz from bottles of 32', (amount, sentence) => {
    expect(pourSentence(ounces(amount), lot)).toBe(sentence);
  });
  it('is absent for a lot without a bottle size', () => {
    expect(pourSentence(ounces('30'), { seq: 14 })).toBeUndefined();
  });
});

describe('the units offered', () => {
  it('start with the person’s own, name each once, and keep imperial ones apart from US ones', () => {
    expect(offeredVolumes('[qt_us]', primary)).toEqual(['[qt_us]', '[foz_us]', 'L', 'mL']);
    expect(offeredVolumes('[qt_br]', undefined)).toEqual(['[qt_br]', '[foz_br]', 'mL', 'L']);
  });
});
