import { describe, expect, it } from 'vitest';
import { lotAmount } from '@/lib/domain/shelf';
import { purchaseFrom, receiptFrom, receiptProblems } from '@/lib/domain/receipt';

const now = '2025-10-19T18:00:00.000Z';
const fields = {
  'boughtOn/date': '2025-10-12',
  'boughtOn/time': '11:05',
  zone: 'America/Denver',
  'supplier/name': 'Brandywell Powersports',
  currency: 'USD',
  total: '97.47',
  'lines/b/product': 'Tarn TN-2204 oil filter',
  'lines/b/kind': 'part',
  'lines/b/partNumber': 'TN-2204',
  'lines/b/quantity': '1',
  'lines/b/price': '18,49',
  'lines/b/position': '2',
  'lines/a/product': 'Fernhill 20W-50',
  'lines/a/grade': 'SAE 20W-50',
  'lines/a/containers': '6',
  'lines/a/containerSize/amount': '1',
  'lines/a/containerSize/unit': '[qt_us]',
  'lines/a/position': '1',
  'lines/c/product': 'Gloves',
  'lines/c/removed': 'yes',
  'photos/u1/role': 'receipt-front',
  later: 'ignored',
};
const without = (...names: string[]) =>
  Object.fromEntries(Object.entries(fields).filter(([name]) => !names.includes(name)));
const problemsOf = (changed: Record<string, string>, ...names: string[]) =>
  receiptProblems(receiptFrom({ ...without(...names), ...changed }), { now });

describe('receiptFrom', () => {
  it('orders lines, drops removed ones, and takes a line with containers for a fluid', () => {
    const receipt = receiptFrom(fields);
    expect(receipt.lines.map(({ id, kind }) => [id, kind])).toEqual([
      ['a', 'fluid'],
      ['b', 'part'],
    ]);
    expect(receipt.photos).toEqual([{ uploadId: 'u1', role: 'receipt-front' }]);
    expect(receiptFrom({ 'lines/x/product': 'O-ring' }).lines[0]?.kind).toBe('part');
  });
});

describe('receiptProblems', () => {
  it('finds nothing wrong with a good receipt', () => {
    expect(problemsOf({})).toEqual({});
    expect(problemsOf({}, 'boughtOn/time', 'supplier/name', 'total', 'lines/b/price', 'currency')).toEqual({});
  });
  it('asks for what an empty receipt lacks', () => {
    expect(Object.keys(receiptProblems(receiptFrom({}), { now })).sort()).toEqual(['boughtOn/date', 'lines', 'zone']);
  });
  it.each([
    ['2025-10-18', false],
    ['2025-10-19', false],
    ['2025-10-20', true],
  ])('bought on %s, seen on the 19th: refused %s', (date, isRefused) => {
    expect('boughtOn/date' in problemsOf({ 'boughtOn/date': date })).toBe(isRefused);
  });
  it.each([
    [{ 'boughtOn/date': '2025-02-30' }, 'boughtOn/date', 'not a day of the calendar'],
    [{ 'boughtOn/time': '25:00' }, 'boughtOn/time', 'not a time of day'],
    [{ zone: 'Mars/Base' }, 'zone', 'not a time zone'],
    [{ currency: 'QQQ' }, 'currency', 'not a currency'],
    [{ total: '1.2.3' }, 'total', 'not a number'],
    [{ 'lines/b/price': '18.499' + '9' }, 'lines/b/price', 'at most 2 digits'],
    [{ 'lines/b/quantity': '1.5' }, 'lines/b/quantity', 'whole number'],
    [{ 'lines/a/containers': '0' }, 'lines/a/containers', 'whole number'],
    [{ 'lines/a/containers': '10000' }, 'lines/a/containers', 'whole number'],
    [{ 'lines/a/containerSize/amount': '0' }, 'lines/a/containerSize/amount', 'more than nothing'],
    [{ 'lines/a/containerSize/unit': 'km' }, 'lines/a/containerSize/unit', 'does not measure a fluid'],
  ] as const)('%j', (changed, field, words) => {
    expect(problemsOf(changed as Record<string, string>)[field]).toContain(words);
  });
  it('asks for currency, product and container size where they are missing', () => {
    expect(problemsOf({}, 'currency').currency).toContain('Choose the currency');
    expect(problemsOf({}, 'lines/a/product')['lines/a/product']).toContain('Name the product');
    expect(problemsOf({}, 'lines/a/containerSize/unit')['lines/a/containerSize/unit']).toContain('Choose the unit');
  });
});

describe('purchaseFrom', () => {
  it('makes the parts of the entry, prices in minor units', () => {
    expect(purchaseFrom(receiptFrom(fields))).toEqual({
      body: {
        boughtOn: { date: '2025-10-12', time: '11:05', zone: 'America/Denver' },
        lines: [
          {
            line: 1,
            product: 'Fernhill 20W-50',
            kind: 'fluid',
            grade: 'SAE 20W-50',
            containers: 6,
            containerSize: { amount: '1', unit: '[qt_us]' },
          },
          { line: 2, product: 'Tarn TN-2204 oil filter', kind: 'part', partNumber: 'TN-2204', quantity: '1' },
        ],
      },
      supplier: { name: 'Brandywell Powersports' },
      prices: { currency: 'USD', total: '9747', lines: [{ line: 2, price: '1849' }] },
    });
  });
  it('leaves out supplier and prices nobody entered', () => {
    const purchase = purchaseFrom(receiptFrom(without('supplier/name', 'total', 'lines/b/price')));
    expect(Object.keys(purchase)).toEqual(['body']);
  });
  it('makes lines a lot can be counted from', () => {
    const { body } = purchaseFrom(receiptFrom(fields));
    expect(body.lines.map(lotAmount)).toEqual([
      { amount: '6', unit: '[qt_us]' },
      { amount: '1', unit: '{piece}' },
    ]);
  });
  it('throws for a receipt that has problems', () => {
    expect(() => purchaseFrom(receiptFrom({}))).toThrow('day and time zone');
    expect(() => purchaseFrom(receiptFrom(without('lines/b/quantity')))).toThrow('Line 2');
    expect(() => purchaseFrom(receiptFrom(without('lines/a/containers')))).toThrow('Line 1');
  });
});
