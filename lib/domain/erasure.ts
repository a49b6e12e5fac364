import type { PartName } from '@/lib/evidence/format';

/** Parts that may be destroyed for good. Never the body: what was done is the record itself. */
export const erasableParts = [
  'author', 'contact', 'identity', 'notes', 'prices', 'supplier', 'attachments',
] as const satisfies readonly PartName[]; // prettier-ignore
export type ErasablePart = (typeof erasableParts)[number];

/** What each part is called where people read of it. */
export const partWords: Record<PartName, string> = {
  attachments: 'pictures and papers',
  author: 'author',
  body: 'text',
  contact: 'contact',
  identity: 'VIN and numbers',
  notes: 'notes',
  prices: 'prices',
  supplier: 'supplier',
};

/** What must be typed before anything is destroyed. */
export const erasingWord = 'erase';

/**
 * What the record says of an erasure, without a word of what was erased.
 *
 * @example erasureText({ part: 'notes', of: 'entry 7', reason: '' })
 * // 'Erased for good: the notes of entry 7. That this part was there can still be seen; what it said is gone.'
 */
export function erasureText({ part, of, reason }: { part: ErasablePart; of: string; reason: string }): string {
  const text =
    `Erased for good: the ${partWords[part]} of ${of}. That this part was there can still be seen; ` +
    'what it said is gone.';
  return reason === '' ? text : `${text} Reason given: ${reason}`;
}

/**
 * Whether a field of the draft that was sealed says what a part says, so that erasing the part must reach it too.
 *
 * @example isFieldOfPart('photos/7c0e/caption', 'attachments') // true
 */
export function isFieldOfPart(field: string, part: ErasablePart): boolean {
  switch (part) {
    case 'attachments':
      return field.startsWith('photos/');
    case 'notes':
      return field === 'notes';
    case 'supplier':
      return field === 'supplier' || field.startsWith('supplier/');
    case 'prices':
      return field === 'total' || field === 'currency' || /^lines\/[^/]+\/price$/.test(field);
    default:
      return false;
  }
}
