import { describe, expect, it } from 'vitest';
import { capacityWords, missingWord, roleWords } from '@/lib/domain/record-words';
import { attachmentRoles, countersignCapacities } from '@/lib/evidence/format';

// The words of the product's own vocabulary; common practice, no source.
describe('words of the record', () => {
  it('tell every role of a picture or paper apart', () => {
    expect(Object.keys(roleWords).sort()).toEqual([...attachmentRoles].sort());
    expect(new Set(Object.values(roleWords)).size).toBe(attachmentRoles.length);
  });

  it('tell every capacity apart, in lower case, to follow a name', () => {
    expect(Object.keys(capacityWords).sort()).toEqual([...countersignCapacities].sort());
    expect(Object.values(capacityWords).every((words) => words === words.toLowerCase())).toBe(true);
    expect(new Set(Object.values(capacityWords)).size).toBe(countersignCapacities.length);
  });

  it('tell what was erased from what is withheld, and both from what nobody stated', () => {
    expect(missingWord('identity', { erased: ['identity'], withheld: [] })).toBe('erased');
    expect(missingWord('identity', { erased: [], withheld: ['identity'] })).toBe('withheld');
    expect(missingWord('identity', { erased: ['notes'], withheld: ['author'] })).toBe('not stated');
    expect(missingWord('identity', undefined)).toBe('not stated');
  });
});
