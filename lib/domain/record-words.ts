import type { AttachmentRole, CountersignCapacity, PartName } from '@/lib/evidence/format';

/** What a picture or paper is, on screen and on paper alike. */
export const roleWords: Record<AttachmentRole, string> = {
  'receipt-front': 'Receipt, front',
  'receipt-back': 'Receipt, back',
  'receipt-page': 'Receipt, page',
  odometer: 'Odometer',
  'as-found': 'As found',
  'as-left': 'As left',
  magnet: 'Magnet',
  part: 'Part',
  'manual-page': 'Manual page',
  'work-order': 'Work order',
  'lab-report': 'Laboratory report',
  document: 'Document',
};

/** In which capacity a shop vouches, as it follows the shop's name. */
export const capacityWords: Record<CountersignCapacity, string> = {
  'did-the-work': 'did the work',
  inspected: 'inspected the finished work',
  'was-present': 'was present',
  'checked-papers': 'checked the papers only',
};

/**
 * Why something that a part would say is not to be read: a reader must not take what was erased for what is kept back,
 * nor what nobody ever stated for either.
 *
 * @param entry the entry whose part it is; undefined if it is not there
 * @example missingWord('identity', { erased: [], withheld: ['identity'] }) // 'withheld'
 */
export function missingWord(
  part: PartName,
  entry: { erased: readonly PartName[]; withheld: readonly PartName[] } | undefined,
): 'erased' | 'withheld' | 'not stated' {
  if (entry?.erased.includes(part) === true) return 'erased';
  return entry?.withheld.includes(part) === true ? 'withheld' : 'not stated';
}
