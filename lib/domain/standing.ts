/** What the rule needs to know of a line of a log. */
export interface LogLineKind {
  seq: number;
  kind: string;
  /** The earlier line it is about; null where it is about none. */
  refersToSeq: number | null;
}

/**
 * Which lines are struck, each with the strike that does it. A strike can itself be struck; then it withdraws nothing,
 * and what it was about stands again. Taken from the last to the first, because only a later line can strike one.
 * Where two strikes of one line stand, the earlier one counts. The order of the lines given makes no difference.
 *
 * @example struckLines([{ seq: 3, kind: 'strike', refersToSeq: 2 }]) // Map { 2 → 3 }
 * @example struckLines([{ seq: 3, kind: 'strike', refersToSeq: 2 }, { seq: 4, kind: 'strike', refersToSeq: 3 }]) // Map { 3 → 4 }
 */
export function struckLines(lines: Iterable<LogLineKind>): Map<number, number> {
  const strikes = [...lines].filter(({ kind }) => kind === 'strike').sort((a, b) => b.seq - a.seq);
  const struck = new Map<number, number>();
  for (const { seq, refersToSeq } of strikes) {
    // A line that claims to strike a later one, or itself, strikes nothing.
    if (refersToSeq === null || refersToSeq >= seq || struck.has(seq)) continue;
    struck.set(refersToSeq, seq);
  }
  return struck;
}

/** Kinds an owner may withdraw. A countersignature is its shop's word: only the shop could take it back. */
const strikableKinds: ReadonlySet<string> = new Set([
  'service', 'terms', 'reading', 'addendum', 'strike', 'purchase', 'disposal', 'correction',
]); // prettier-ignore

/**
 * Whether an owner may strike a line of this kind. Never the opening, on which everything stands; nor what others
 * signed: a countersignature struck by the owner would be a doubt taken out of sight.
 *
 * @example mayBeStruck('opening') // false
 */
export function mayBeStruck(kind: string): boolean {
  return strikableKinds.has(kind);
}
