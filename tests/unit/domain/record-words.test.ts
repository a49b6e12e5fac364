import { describe, expect, it } from 'vitest';
import { capacityWords, roleWords } from '@/lib/domain/record-words';
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
});
