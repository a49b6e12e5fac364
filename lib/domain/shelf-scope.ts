import type { PartName } from '@/lib/evidence/format';
import { partsOpened, type Scope, type ScopeLine } from './scope';

const nothing: ReadonlySet<PartName> = new Set();
type Referring = Pick<ScopeLine, 'seq' | 'kind' | 'refersTo'>;

/**
 * The purchase that each line of a shelf's log is about in the end: a purchase about itself, corrections and strikes
 * about what they refer to. Other lines are left out.
 *
 * @example purchaseOfLine(lines).get(5) // 2
 */
export function purchaseOfLine(lines: readonly Referring[]): Map<number, number> {
  const purchases = new Map<number, number>();
  for (const { seq, kind, refersTo } of [...lines].sort((a, b) => a.seq - b.seq)) {
    const isSaidOf = (kind === 'correction' || kind === 'strike') && refersTo !== null;
    const purchase = kind === 'purchase' ? seq : isSaidOf ? purchases.get(refersTo) : undefined;
    if (purchase !== undefined) purchases.set(seq, purchase);
  }
  return purchases;
}

/**
 * Which parts of each line of a shelf's log a scope opens: those of the purchases that an opened entry draws from, and
 * of what was said about them later. Whatever refers to a closed line stays closed with it.
 *
 * @param drawn seqs of the purchases drawn from
 * @example openedShelfParts(usualScope, lines, new Set([2])).get(3)?.has('body') // false
 */
export function openedShelfParts(
  scope: Scope,
  lines: readonly ScopeLine[],
  drawn: ReadonlySet<number>,
): Map<number, ReadonlySet<PartName>> {
  const purchases = purchaseOfLine(lines);
  const opened = new Map<number, ReadonlySet<PartName>>();
  const isOpened = ({ seq, kind, refersTo }: ScopeLine): boolean => {
    const purchase = purchases.get(seq);
    if (purchase === undefined || !drawn.has(purchase)) return false;
    return kind === 'purchase' || (opened.get(refersTo ?? -1) ?? nothing).has('body');
  };
  for (const line of [...lines].sort((a, b) => a.seq - b.seq)) {
    opened.set(line.seq, isOpened(line) ? partsOpened(scope, line) : nothing);
  }
  return opened;
}
