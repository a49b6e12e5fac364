import { describe, expect, it } from 'vitest';
import { balanceLeft, lotWords, stillWanted, suitableLots } from '@/components/worksheet/draw-figures';
import type { Lot } from '@/lib/domain/shelf';
import type { Amount } from '@/lib/evidence/format';

const quarts = (amount: string): Amount => ({ amount, unit: '[qt_us]' });
const lot = (line: number, product: string, more: Partial<Lot> = {}): Lot => ({
  key: `shelf/9/${line}`, log: 'shelf', seq: 9, leafHash: '00', line, product, kind: 'fluid',
  boughtOn: { date: '2026-08-08', zone: 'America/Denver' }, unit: '[qt_us]', bought: quarts('4'), balance: quarts('4'), ...more,
}); // prettier-ignore
const engine = lot(1, 'Fernhill V-Twin 20W-50', { grade: 'SAE 20W-50' });
const gear = lot(2, 'Fernhill Primary and Gear');
const names = (lots: readonly Lot[]) => lots.map(({ product }) => product);

describe('lots proposed for a fill or part', () => {
  it('leaves out a lot without a grade where a grade is specified', () => {
    const lots = suitableLots([gear, engine], { title: 'Engine', grade: '20W-50' });
    expect(names(lots)).toEqual(['Fernhill V-Twin 20W-50']);
  });

  it('goes by the name where the specification says nothing', () => {
    expect(names(suitableLots([engine, gear], { title: 'Primary chaincase' }))).toEqual(['Fernhill Primary and Gear']);
    expect(suitableLots([engine, gear], { title: 'Gearbox' })).toEqual([]);
  });

  it('proposes one product, so that a fill is mixed only by choice', () => {
    const other = lot(3, 'Tarn 20W-50', { grade: '20W-50' });
    const more = lot(4, 'Fernhill V-Twin 20W-50', { grade: 'SAE 20W-50' });
    expect(suitableLots([engine, other, more], { title: 'Engine', grade: 'SAE 20W-50' })).toEqual([engine, more]);
  });

  it('goes on to the next product when the first is used up', () => {
    const empty = { ...engine, balance: quarts('0') };
    const other = lot(3, 'Tarn 20W-50', { grade: '20W-50' });
    expect(suitableLots([empty, other], { title: 'Engine', grade: 'SAE 20W-50' })).toEqual([other]);
  });
});

describe('what is left', () => {
  it.each([
    ['4.49', quarts('0.01')],
    ['4.5', undefined],
    ['4.51', undefined],
  ])('of 4.5 US qt with %s US qt drawn', (drawn, left) => {
    expect(stillWanted(quarts('4.5'), quarts(drawn))).toEqual(left);
  });

  it('is a gap in words, and more drawn than used is a mistake', () => {
    expect(balanceLeft({ wanted: quarts('4.5'), drawn: quarts('4'), lots: 1 })).toContain('0.5 US qt not from a lot');
    expect(balanceLeft({ wanted: quarts('4.5'), drawn: quarts('5'), lots: 1 })).toContain('Correct one of the two');
  });

  // 1 US qt is 946.352946 mL (NIST SP 811, table of conversion factors): what 4 qt and 1 qt leave of whole millilitres.
  it.each([
    ['0.411784', 'less than 1 mL left'],
    ['1', '1 mL left'],
    ['161.352946', 'about 161 mL left'],
  ])('reads %s mL as words a bottle can be read by', (amount, words) => {
    const text = lotWords({ ...engine, balance: { amount, unit: 'mL' }, unit: 'mL' });
    expect(text).toBe(`Lot 9: Fernhill V-Twin 20W-50, bought 8 Aug 2026, ${words}`);
  });
});
