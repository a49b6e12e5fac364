import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { fieldTree, foldChanges, itemsOf, textAt, type FieldChange } from '@/lib/domain/field-changes';

const at = (second: number): string => `2026-04-18T10:00:${String(second).padStart(2, '0')}.000Z`;
const change = (id: string, field: string, value: string | null, second: number): FieldChange => ({
  id,
  field,
  value,
  deviceAt: at(second),
});

describe('foldChanges', () => {
  it('lets the later device time win, whatever arrives last', () => {
    expect(foldChanges([change('a', 'title', 'new', 2), change('b', 'title', 'old', 1)])).toEqual({ title: 'new' });
  });
  it('lets the greater id win at the same device time', () => {
    expect(foldChanges([change('b', 'title', 'b', 1), change('a', 'title', 'a', 1)])).toEqual({ title: 'b' });
  });
  it('compares instants, not their spelling', () => {
    const early = { ...change('a', 'title', 'early', 0), deviceAt: '2026-04-18T12:00:00+02:00' };
    const late = { ...change('b', 'title', 'late', 0), deviceAt: '2026-04-18T10:00:01.000Z' };
    expect(foldChanges([late, early])).toEqual({ title: 'late' });
  });
  it('clears a field by null, and an older value does not bring it back', () => {
    expect(foldChanges([change('b', 'title', null, 2), change('a', 'title', 'old', 1)])).toEqual({});
  });
  it('gives an unreadable time no say', () => {
    const broken = { ...change('z', 'title', 'broken', 0), deviceAt: 'yesterday' };
    expect(foldChanges([change('a', 'title', 'good', 1), broken])).toEqual({ title: 'good' });
    expect(foldChanges([broken, change('a', 'title', 'good', 1)])).toEqual({ title: 'good' });
  });
  it('takes a field named like an object’s own machinery as a field', () => {
    const fields = foldChanges([change('a', '__proto__', 'x', 1)]);
    expect(Object.keys(fields)).toEqual(['__proto__']);
    expect(({} as Record<string, unknown>).x).toBeUndefined();
  });

  it('comes to the same in any order of arrival and with any duplication', () => {
    const anyChange = fc.record({
      field: fc.constantFrom('title', 'notes', 'odometer/value', 'tasks/a/title'),
      value: fc.option(fc.string({ maxLength: 3 }), { nil: null }),
      second: fc.integer({ min: 0, max: 5 }),
    });
    const history = fc
      .array(anyChange, { maxLength: 30 })
      .map((list) => list.map(({ field, value, second }, index) => change(`c${index}`, field, value, second)));
    const shuffled = history.chain((list) =>
      fc.tuple(fc.constant(list), fc.shuffledSubarray(list, { minLength: list.length }), fc.subarray(list)),
    );
    fc.assert(
      fc.property(shuffled, ([list, otherOrder, again]) => {
        expect(foldChanges([...again, ...otherOrder, ...again])).toEqual(foldChanges(list));
        expect(JSON.stringify(foldChanges(otherOrder))).toBe(JSON.stringify(foldChanges(list)));
      }),
    );
  });

  it('comes to the same when halves are folded apart by two devices and then met', () => {
    const device = (prefix: string) =>
      [0, 1, 2, 3].map((n) => change(`${prefix}${n}`, n % 2 ? 'a' : 'b', `${prefix}${n}`, n));
    expect(foldChanges([...device('p'), ...device('q')])).toEqual(foldChanges([...device('q'), ...device('p')]));
  });
});

describe('fieldTree', () => {
  const tree = fieldTree({
    'tasks/b/position': '10',
    'tasks/a/position': '9',
    'tasks/d/title': 'no position',
    'tasks/c/title': 'no position',
    'tasks/e/removed': 'yes',
    'tasks/e/title': 'gone',
    tasks: 'a text where a collection is',
    'odometer/value': '  10238 ',
    'odometer/unit': ' ',
  });
  it('orders items by position as a number, then by id, those without one last', () => {
    expect(itemsOf(tree, 'tasks').map(({ id }) => id)).toEqual(['a', 'b', 'c', 'd']);
  });
  it('reads texts trimmed, blank ones as absent', () => {
    expect(textAt(tree, 'odometer/value')).toBe('10238');
    expect(textAt(tree, 'odometer/unit')).toBeUndefined();
    expect(textAt(tree, 'nothing/here')).toBeUndefined();
    expect(itemsOf(tree, 'nothing')).toEqual([]);
  });
});
