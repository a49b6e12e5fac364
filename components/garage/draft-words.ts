import { unfinishedState } from '@/lib/domain/procedures';
import { worksheetFrom, type Fields } from '@/lib/domain/worksheet';
import type { KeptDraft } from './draft-store';

/** What a draft is called in a list: what its person called it, else what it holds. */
export function draftTitle({ kind, refersToSeq }: Pick<KeptDraft, 'kind' | 'refersToSeq'>, fields: Fields): string {
  if (kind === 'addendum') return `Addendum to entry ${refersToSeq ?? ''}, not sealed`;
  if (kind === 'receipt') return fields['supplier/name'] ?? 'Receipt, supplier not entered';
  const { title, tasks } = worksheetFrom(fields);
  const named = tasks.flatMap((task) => task.title ?? []);
  return title ?? (named.length === 0 ? 'Worksheet, no task chosen' : named.join(', '));
}

/** In what condition the machine stands while the work is interrupted: one sentence for each task left halfway. */
export function unfinishedStates(fields: Fields): string[] {
  const states = worksheetFrom(fields).tasks.flatMap(
    ({ key, steps }) => unfinishedState(key, Object.keys(steps)) ?? [],
  );
  return [...new Set(states)];
}
