import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { readSeqs, writeSeqs } from '@/lib/domain/seq-ranges';

describe('numbers of entries as a text', () => {
  it('makes runs of three and more into ranges', () => {
    expect(writeSeqs([])).toBe('');
    expect(writeSeqs([4])).toBe('4');
    expect(writeSeqs([4, 5])).toBe('4,5');
    expect(writeSeqs([6, 4, 5, 9])).toBe('4-6,9');
    expect(writeSeqs([1, 2, 3, 8], { separator: ', ', to: ' to ' })).toBe('1 to 3, 8');
  });
  it('reads back whatever was written', () => {
    fc.assert(
      fc.property(fc.uniqueArray(fc.nat(2000), { minLength: 1 }), (seqs) => {
        expect(readSeqs(writeSeqs(seqs))).toEqual([...seqs].sort((a, b) => a - b));
      }),
    );
  });
  it.each(['', 'a', '1,', '-1', '1-', '5-3', '1.5', '0-999999999', '1 2', '0-15000,15001-30000'])(
    'reads nothing else: %s',
    (text) => {
      expect(readSeqs(text)).toBeNull();
    },
  );
});
