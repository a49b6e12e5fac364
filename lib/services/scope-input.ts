import 'server-only';
import { z } from 'zod';
import { isLocalDate } from '@/lib/domain/instants';
import { closedChoices, forSaleScope, usualScope, type ClosedChoice, type Scope } from '@/lib/domain/scope';
import { readSeqs } from '@/lib/domain/seq-ranges';

/** What the form sends where every box of entries is empty; an empty text means that all are ticked. */
export const noEntries = 'none';
const longestList = 20_000;

const lines = z.string().max(longestList, 'That is more than can be chosen at once.').default('');
const optionalDay = z
  .string()
  .trim()
  .default('')
  .refine((text) => text === '' || isLocalDate(text), 'Give the day as year, month and day, or leave it empty.');

/** The choice of what is opened, as the forms, the address of the preview and programs send it: text in every field. */
export const scopeFields = {
  opens: z.enum(['usual', 'for-sale', 'choose'], 'Choose what it opens.').default('usual'),
  /** Numbers of entries, `0-5,8`. */
  entries: lines
    .refine((text) => text !== noEntries, 'Tick at least one entry, or all of them.')
    .refine((text) => text === '' || text === noEntries || readSeqs(text) !== null, 'Choose the entries again.'),
  /** Keys of schedule items, one a line. */
  items: lines,
  from: optionalDay,
  to: optionalDay,
  /** What stays closed, with commas between. */
  closed: lines.refine(
    (text) => wordsIn(text, ',').every((word) => (closedChoices as readonly string[]).includes(word)),
    'Choose again what stays closed.',
  ),
};
export type ScopeInput = z.infer<z.ZodObject<typeof scopeFields>>;

/** For a schema with `scopeFields`: what no field can say of itself. */
export function refuseBackwards({ opens, from, to }: ScopeInput, context: z.RefinementCtx): void {
  if (opens !== 'choose' || from === '' || to === '' || from <= to) return;
  context.addIssue({ code: 'custom', path: ['to'], message: 'The last day lies before the first. Swap them.' });
}

const wordsIn = (text: string, separator: string): string[] =>
  text.split(separator).flatMap((word) => (word.trim() === '' ? [] : [word.trim()]));

/** The scope that was chosen. Fields under “Choose” count only where that was chosen. */
export function scopeOf({ opens, entries, items, from, to, closed }: ScopeInput): Scope {
  if (opens === 'usual') return usualScope;
  if (opens === 'for-sale') return forSaleScope;
  const seqs = entries === '' ? null : readSeqs(entries);
  const chosen = wordsIn(items, '\n');
  const filters = {
    ...(seqs === null ? {} : { seqs }),
    ...(chosen.length === 0 ? {} : { items: chosen }),
    ...(from === '' ? {} : { from }),
    ...(to === '' ? {} : { to }),
  };
  return {
    ...(Object.keys(filters).length === 0 ? {} : { entries: filters }),
    closed: wordsIn(closed, ',') as ClosedChoice[],
  };
}
