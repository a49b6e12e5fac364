import type { AttachmentRole } from '@/lib/evidence/format';
import { attachmentRoles } from '@/lib/evidence/format';
import { fieldTree, itemsOf, textAt, type Fields } from './field-changes';

/** An addendum as it is being written. */
export interface AddendumDraft {
  /** Without space around it, in Unicode normalisation form C. */
  text: string;
  photos: { id: string; role: AttachmentRole | undefined; caption: string }[];
}

const sealed = (text: string | undefined): string => (text ?? '').replaceAll('\r\n', '\n').normalize('NFC').trim();

/**
 * What the fields of an addendum's draft come to; photos that were removed are left out.
 *
 * @example addendumFrom({ text: ' Checked hot. ' }) // { text: 'Checked hot.', photos: [] }
 */
export function addendumFrom(fields: Fields): AddendumDraft {
  const photos = itemsOf(fieldTree(fields), 'photos').map(({ id, node }) => ({
    id,
    role: attachmentRoles.find((role) => role === textAt(node, 'role')),
    caption: sealed(textAt(node, 'caption')),
  }));
  return { text: sealed(fields.text), photos };
}

/** How long an addendum may be, in characters. */
export const longestAddendum = 8000;

/**
 * What keeps an addendum from being sealed, by field.
 *
 * @example addendumProblems({ photos: [], text: '' }) // { text: 'Write what this adds …' }
 */
export function addendumProblems({ text }: AddendumDraft): Record<string, string> {
  if (text === '') return { text: 'Write what this adds to the entry, in your own words.' };
  if (text.length <= longestAddendum) return {};
  return {
    text: `This has ${text.length} characters; at most 8,000 fit into one addendum. Seal the rest as another one.`,
  };
}

/**
 * The whole addendum as one text, to be compared: what a person saw when they sealed, and what would be sealed.
 *
 * @example addendumShown({ text: 'Checked hot.', photos: [] }) // '{"text":"Checked hot.","photos":[]}'
 */
export function addendumShown({ text, photos }: AddendumDraft): string {
  const inOrder = [...photos].sort((a, b) => (a.id < b.id ? -1 : 1));
  return JSON.stringify({ text, photos: inOrder.map(({ id, role, caption }) => [id, role ?? 'document', caption]) });
}
