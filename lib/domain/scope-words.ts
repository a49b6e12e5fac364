import { formatLocalDate } from './instants';
import type { ClosedChoice, Scope } from './scope';
import { writeSeqs } from './seq-ranges';
import { scopeChoice } from './stored-scope';

/** What stays closed, as a list of it reads. */
export const closedWords: Record<ClosedChoice, string> = {
  prices: 'prices',
  supplier: 'suppliers',
  names: 'names of people',
  vin: 'VIN, frame and engine number',
  notes: 'notes',
  pictures: 'photos of the work',
  'receipt-pictures': 'pictures of receipts and papers',
};

/**
 * What a scope opens, in words. `titleOf` names a schedule item; one it does not know is called by its key.
 *
 * @example scopeWords({ entries: { seqs: [3, 4, 5] }, closed: ['prices'] }) // 'Entries 3 to 5; without prices'
 */
export function scopeWords(scope: Scope, titleOf: (item: string) => string | undefined = () => undefined): string {
  const choice = scopeChoice(scope);
  if (choice === 'usual') return 'Everything but prices';
  const closed = scope.closed.map((one) => closedWords[one]);
  const without = closed.length === 0 ? 'every part of them' : `without ${joined(closed, 'and')}`;
  if (choice === 'for-sale') return `For sale: all entries, ${without}`;
  const { seqs, items, from, to } = scope.entries ?? {};
  const only = [
    seqs === undefined ? undefined : entryWords(seqs),
    items === undefined
      ? undefined
      : `services of ${joined(
          items.map((item) => titleOf(item) ?? item),
          'or',
        )}`,
    periodWords(from, to),
  ].filter((words) => words !== undefined);
  const words = only.length === 0 ? 'All entries' : only.join(', ');
  return `${words.charAt(0).toUpperCase()}${words.slice(1)}; ${without}`;
}

function entryWords(seqs: readonly number[]): string {
  if (seqs.length === 0) return 'none but the opening, the terms and strikes';
  return `${seqs.length === 1 ? 'entry' : 'entries'} ${writeSeqs(seqs, { separator: ', ', to: ' to ' })}`;
}

function periodWords(from: string | undefined, to: string | undefined): string | undefined {
  if (from !== undefined && to !== undefined) return `${formatLocalDate(from)} to ${formatLocalDate(to)}`;
  if (from !== undefined) return `since ${formatLocalDate(from)}`;
  return to === undefined ? undefined : `until ${formatLocalDate(to)}`;
}

function joined(words: readonly string[], last: 'and' | 'or'): string {
  return words.length < 2 ? (words[0] ?? '') : `${words.slice(0, -1).join(', ')} ${last} ${words.at(-1)}`;
}
