import type { Attachment, AttachmentRole } from '@/lib/evidence/format';
import { roleWords } from './record-words';

const start = 'Blacked-out copy of SHA-256 ';

/**
 * The caption under which a blacked-out picture is sealed: it names the shared copy it was made from.
 *
 * @param sha256 hex, of the shared copy
 * @example blackedOutCaption('9f86…') // 'Blacked-out copy of SHA-256 9f86…'
 */
export const blackedOutCaption = (sha256: string): string => `${start}${sha256}`;

/**
 * The SHA-256 (hex) of the shared copy that an attachment was made from by blacking parts of it out; null for any other
 * attachment. Whoever sends a picture in can write the same caption, but not the rest: a picture that came in has a
 * shared copy of its own, and this one is its own shared copy.
 *
 * @example blackedOutFrom(photograph) // null
 */
export function blackedOutFrom({
  sha256,
  caption,
  copy,
}: Pick<Attachment, 'sha256' | 'caption' | 'copy'>): string | null {
  const from = caption.startsWith(start) ? caption.slice(start.length) : '';
  if (!/^[0-9a-f]{64}$/.test(from) || from === sha256) return null;
  return copy?.sha256 === sha256 && copy.removed.length === 0 ? from : null;
}

/**
 * Whether a line shows nothing but blacked-out pictures, so that it may stay open where pictures are closed.
 *
 * @example isBlackedOutThroughout([]) // false
 */
export function isBlackedOutThroughout(attachments: readonly Attachment[]): boolean {
  return attachments.length > 0 && attachments.every((one) => blackedOutFrom(one) !== null);
}

/**
 * What the record says of a blacked-out copy.
 *
 * @param of `entry 7`, or `line 3` of a shelf’s log
 * @example blackedOutText({ role: 'receipt-front', of: 'line 3', reason: '' }) // 'Blacked-out copy of Receipt, front of line 3.'
 */
export function blackedOutText({ role, of, reason }: { role: AttachmentRole; of: string; reason: string }): string {
  const text = `Blacked-out copy of ${roleWords[role]} of ${of}.`;
  return reason === '' ? text : `${text} ${reason}`;
}
