import type { OdometerReading } from '@/lib/domain/odometer';
import { warrantyState, type WarrantyState } from '@/lib/domain/warranty';
import type { WarrantyTerm } from '@/lib/evidence/format';
import { notJudged, type Opened } from './opened';

/**
 * How each warranty stands. Its limits are printed in the terms; whether the distance is reached is only said where
 * every reading is opened.
 */
export function warrantyOf(
  terms: readonly WarrantyTerm[],
  readings: readonly OdometerReading[],
  at: { now: string; zone: string },
  opened: Opened,
): WarrantyState[] {
  if (opened.unjudged === 0) return terms.map((term) => warrantyState(term, readings, at));
  return terms.map((term) => {
    const state = warrantyState(term, [], at);
    if (state.endsAt === undefined) return state;
    return { ...state, sentence: `${state.sentence} Whether the distance is reached is ${notJudged(opened)}.` };
  });
}
