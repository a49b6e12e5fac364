import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Amount, PurchaseLine, UnitCode } from '@/lib/evidence/format';
import {
  containersToBuy,
  drawProblem,
  hasLeft,
  lotAmount,
  lotKey,
  lotsOf,
  pourFrom,
  proposeDraws,
  totalTaken,
  type Lot,
  type Purchase,
} from '@/lib/domain/shelf';
import { convert, Decimal } from '@/lib/domain/units';

const log = 'b7f0c2aa-0000-4000-8000-000000000001';
const oz = (amount: string): Amount => ({ amount, unit: '[foz_us]' });
const qt = (amount: string): Amount => ({ amount, unit: '[qt_us]' });
const oil = (line: number, containers: number, containerSize: Amount): PurchaseLine => ({
  line, product: 'Fernhill 20W-50', kind: 'fluid', grade: 'SAE 20W-50', containers, containerSize,
}); // prettier-ignore
const purchase = (seq: number, date: string, lines: PurchaseLine[]): Purchase => ({
  log,
  seq,
  leafHash: String(seq).padStart(64, '0'),
  body: { boughtOn: { date, zone: 'America/Denver' }, lines },
});
const older = purchase(11, '2025-03-01', [oil(1, 3, qt('1'))]);
const newer = purchase(12, '2025-10-12', [
  oil(1, 6, qt('1')),
  { line: 2, product: 'Tarn TN-2204', kind: 'part', quantity: '2' },
]);
const key = (seq: number, line = 1) => lotKey({ log, seq, line });

describe('lotAmount', () => {
  it('multiplies containers by their size', () => {
    expect(lotAmount(oil(1, 4, oz('32')))).toEqual(oz('128'));
    expect(lotAmount(oil(1, 3, { amount: '0.946', unit: 'L' }))).toEqual({ amount: '2.838', unit: 'L' });
  });
  it('counts parts in pieces, and refuses a line that states neither', () => {
    expect(lotAmount({ line: 2, product: 'Tarn TN-2204', kind: 'part', quantity: '2' })).toEqual({
      amount: '2',
      unit: '{piece}',
    });
    expect(() => lotAmount({ line: 3, product: 'x', kind: 'part' })).toThrow('Line 3');
  });
});

describe('lotsOf', () => {
  it('lists the oldest first, with what is left in the lot’s own unit', () => {
    const lots = lotsOf(
      [newer, older],
      [
        { lot: key(11), ...oz('32') },
        { lot: key(12, 2), amount: '1', unit: '{piece}' },
      ],
    );
    expect(lots.map((lot) => [lot.seq, lot.line, lot.balance])).toEqual([
      [11, 1, qt('2')],
      [12, 1, qt('6')],
      [12, 2, { amount: '1', unit: '{piece}' }],
    ]);
    expect(lots[2]).not.toHaveProperty('grade');
  });
  it('falls back to exact millilitres where the own unit cannot hold the balance', () => {
    const [lot] = lotsOf([older], [{ lot: key(11), amount: '100', unit: 'mL' }]);
    expect(lot?.balance).toEqual({ amount: '2739.058838', unit: 'mL' });
  });
  it('takes a correction that adds to a lot', () => {
    expect(lotsOf([older], [{ lot: key(11), ...qt('-1') }])[0]?.balance).toEqual(qt('4'));
  });
});

describe('proposeDraws', () => {
  const lots = lotsOf([older, newer], []).filter((lot) => lot.kind === 'fluid');
  it('empties the oldest lot before it opens the next', () => {
    const { draws, uncovered } = proposeDraws(lots, qt('4.5'), '2025-10-19');
    expect(
      draws.map(({ lot, amount, balanceBefore, balanceAfter }) => [lot.seq, amount, balanceBefore, balanceAfter]),
    ).toEqual([
      [11, '3', qt('3'), qt('0')],
      [12, '1.5', qt('6'), qt('4.5')],
    ]);
    expect(uncovered).toBeUndefined();
  });
  it('leaves what no lot covers as uncovered', () => {
    expect(proposeDraws(lots, qt('9.5'), '2025-10-19').uncovered).toEqual(qt('0.5'));
    expect(proposeDraws(lots, qt('9'), '2025-10-19').uncovered).toBeUndefined();
    expect(proposeDraws([], qt('1'), '2025-10-19')).toEqual({ draws: [], uncovered: qt('1') });
  });
  it('does not draw from a lot bought after the work: the day before, the day, the day after', () => {
    const drawnOn = (on: string) => proposeDraws(lots, qt('9'), on).draws.map(({ lot }) => lot.seq);
    expect(drawnOn('2025-10-11')).toEqual([11]);
    expect(drawnOn('2025-10-12')).toEqual([11, 12]);
    expect(drawnOn('2025-10-13')).toEqual([11, 12]);
  });

  it('neither makes nor loses a drop, in any mix of units', () => {
    const volume = fc.record({
      amount: fc
        .tuple(fc.integer({ min: 1, max: 9999 }), fc.integer({ min: 0, max: 3 }))
        .map(([n, scale]) => new Decimal(n).div(10 ** scale).toFixed()),
      unit: fc.constantFrom<UnitCode[]>('mL', 'L', '[foz_us]', '[qt_us]', '[qt_br]', '[foz_br]'),
    });
    const inMl = ({ amount, unit }: Amount) => convert(amount, unit, 'mL');
    const sum = (amounts: Amount[]) => amounts.reduce((total, one) => total.plus(inMl(one)), new Decimal(0));
    fc.assert(
      fc.property(
        fc.array(volume, { maxLength: 4 }),
        fc.array(volume, { maxLength: 3 }),
        volume,
        (sizes, spilt, wanted) => {
          const purchases = sizes.map((size, index) => purchase(index, '2025-01-01', [oil(1, 2, size)]));
          const taken = spilt.flatMap((amount, index) =>
            index < sizes.length ? [{ lot: key(index), ...amount }] : [],
          );
          const stocked = lotsOf(purchases, taken);
          const { draws, uncovered } = proposeDraws(stocked, wanted, '2025-01-02');
          expect(sum([...draws, ...(uncovered ? [uncovered] : [])]).equals(inMl(wanted))).toBe(true);
          for (const draw of draws) {
            expect(inMl(draw.balanceBefore).minus(inMl(draw)).equals(inMl(draw.balanceAfter))).toBe(true);
            expect(inMl(draw.balanceAfter).gte(0)).toBe(true);
          }
          const after = lotsOf(purchases, [
            ...taken,
            ...draws.map(({ lot, amount, unit }) => ({ lot: lot.key, amount, unit })),
          ]);
          expect(
            sum(after.map(({ balance }) => balance)).equals(
              sum(stocked.map(({ balance }) => balance)).minus(sum(draws)),
            ),
          ).toBe(true);
        },
      ),
    );
  });
});

describe('drawProblem', () => {
  const [lot] = lotsOf([older], []) as [Lot];
  it.each([
    ['2.999', false],
    ['3', false],
    ['3.001', true],
  ])('%s US qt of the 3 left is refused: %s', (amount, isRefused) => {
    expect(drawProblem(lot, qt(amount)) !== undefined).toBe(isRefused);
  });
  it('knows 96 US fl oz for the same as 3 US qt', () => {
    expect(drawProblem(lot, oz('96'))).toBeUndefined();
    expect(drawProblem(lot, oz('96.01'))).toContain('more than the 3 US qt left');
  });
  it('refuses with the numbers and says what can be done', () => {
    expect(drawProblem(lot, qt('5'))).toBe(
      '5 US qt is more than the 3 US qt left of lot 11 (Fernhill 20W-50). ' +
        'Draw 3 US qt; the other 2 US qt can stand as uncovered, which is a gap.',
    );
  });
  it('refuses what an empty lot, another measure, no amount or a later purchase cannot give', () => {
    const empty = { ...lot, balance: qt('0') };
    expect(hasLeft(empty)).toBe(false);
    expect(drawProblem(empty, qt('1'))).toContain('Nothing is left of lot 11');
    expect(drawProblem(lot, { amount: '1', unit: '{piece}' })).toContain('counted in US qt');
    expect(drawProblem(lot, qt('0'))).toContain('Enter how much');
    expect(drawProblem(lot, qt('1'), '2025-02-28')).toContain('bought on 1 Mar 2025, after the work on 28 Feb 2025');
    expect(drawProblem(lot, qt('1'), '2025-03-01')).toBeUndefined();
  });
});

describe('bottle arithmetic', () => {
  // Common practice, no source: bottles of 32 US fl oz, pour off 2 to fill 30, 4 to fill 28.
  it.each([
    ['30', 1, '2'],
    ['28', 1, '4'],
    ['32', 1, '0'],
    ['32.1', 2, '31.9'],
    ['33', 2, '31'],
  ])('%s US fl oz takes %i bottles and leaves %s', (wanted, containers, pourOff) => {
    expect(pourFrom(oz(wanted), oz('32'))).toEqual({ containers, pourOff: oz(pourOff) });
  });
  it('counts what to buy beyond the shelf', () => {
    expect(containersToBuy(qt('4.5'), [], qt('1'))).toBe(5);
    expect(containersToBuy(qt('4.5'), [qt('0.5')], qt('1'))).toBe(4);
    expect(containersToBuy(qt('4.5'), [oz('128'), qt('0.5')], qt('1'))).toBe(0);
    expect(() => pourFrom(qt('1'), qt('0'))).toThrow('more than nothing');
  });
  it('adds up what was taken', () => {
    expect(
      totalTaken(
        [
          { lot: 'a', ...oz('30') },
          { lot: 'b', ...qt('1') },
        ],
        '[foz_us]',
      ),
    ).toEqual(oz('62'));
    expect(totalTaken([], '[foz_us]')).toEqual(oz('0'));
  });
});
