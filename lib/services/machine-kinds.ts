import { bigVTwinTourer, emptyTerms } from '@/lib/domain/presets';
import type { TermsBody } from '@/lib/evidence/format';

/** Kinds a machine can be set up as, in the words the record keeps, with the terms each starts from. */
const termsByKind: Record<string, { title: string; terms: () => TermsBody }> = {
  'big V-twin tourer': { title: 'Big V-twin tourer', terms: bigVTwinTourer },
  'road motorcycle': { title: 'Road motorcycle, schedule left empty', terms: emptyTerms },
  'dual-sport motorcycle': { title: 'Dual-sport or dirt motorcycle, schedule left empty', terms: emptyTerms },
  scooter: { title: 'Scooter, schedule left empty', terms: emptyTerms },
  'ATV or side-by-side': { title: 'ATV or side-by-side, schedule left empty', terms: emptyTerms },
  other: { title: 'Another machine, schedule left empty', terms: emptyTerms },
};

export const machineKinds = Object.entries(termsByKind).map(([kind, { title }]) => ({ kind, title }));

/**
 * The terms a kind of machine starts from; undefined for a kind nobody offered.
 *
 * @example termsForKind('big V-twin tourer')?.schedule[0]?.item // 'engine-oil'
 */
export function termsForKind(kind: string): TermsBody | undefined {
  return Object.hasOwn(termsByKind, kind) ? termsByKind[kind]?.terms() : undefined;
}
