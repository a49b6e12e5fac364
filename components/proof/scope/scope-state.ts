import { forSaleScope, usualScope, type ClosedChoice, type Scope } from '@/lib/domain/scope';
import { writeSeqs } from '@/lib/domain/seq-ranges';
import type { Openable } from '@/lib/services/what-can-be-opened';

export type Line = Openable['lines'][number];

/** What is chosen in the form. The fields under “Choose” keep what they hold while another choice is looked at. */
export interface ScopeState {
  opens: 'usual' | 'for-sale' | 'choose';
  /** Kept as what is left out, so that everything is ticked at first. */
  unticked: ReadonlySet<number>;
  items: readonly string[];
  from: string;
  to: string;
  closed: readonly ClosedChoice[];
}

export const firstState: ScopeState = {
  opens: 'usual',
  unticked: new Set(),
  items: [],
  from: '',
  to: '',
  closed: usualScope.closed,
};

/** The opening, terms and strikes are always opened, and what is about an entry follows it; the rest is chosen. */
const chosenKinds = new Set(['service', 'reading', 'handover']);
export const choosable = (lines: readonly Line[]): Line[] => lines.filter(({ kind }) => chosenKinds.has(kind));

/** Whether a line is kept by what was done and by the period, whatever is ticked. */
export function isWithinFilters({ items, finishedOn }: Line, { items: wanted, from, to }: ScopeState): boolean {
  if (wanted.length > 0 && !items.some((item) => wanted.includes(item))) return false;
  if (from === '' && to === '') return true;
  return finishedOn !== null && (from === '' || finishedOn >= from) && (to === '' || finishedOn <= to);
}

/** All ticked is no list: then what is sealed later is opened too. */
function tickedSeqs(lines: readonly Line[], { unticked }: ScopeState): number[] | undefined {
  const offered = choosable(lines);
  const ticked = offered.filter(({ seq }) => !unticked.has(seq)).map(({ seq }) => seq);
  return ticked.length === offered.length ? undefined : ticked;
}

export function scopeOfState(state: ScopeState, lines: readonly Line[]): Scope {
  if (state.opens === 'usual') return usualScope;
  if (state.opens === 'for-sale') return forSaleScope;
  const { items, from, to, closed } = state;
  const seqs = tickedSeqs(lines, state);
  return {
    entries: {
      ...(seqs === undefined ? {} : { seqs }),
      ...(items.length === 0 ? {} : { items: [...items] }),
      ...(from === '' ? {} : { from }),
      ...(to === '' ? {} : { to }),
    },
    closed: [...closed],
  };
}

/** The fields as form and address carry them; the choice itself is a field of its own. */
export function fieldsOfState(state: ScopeState, lines: readonly Line[]): Record<string, string> {
  if (state.opens !== 'choose') return {};
  const seqs = tickedSeqs(lines, state);
  const entries = seqs === undefined ? '' : seqs.length === 0 ? 'none' : writeSeqs(seqs);
  return { entries, items: state.items.join('\n'), from: state.from, to: state.to, closed: state.closed.join(',') };
}
