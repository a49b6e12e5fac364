import { openedParts, type Scope, type ScopeLine } from './scope';
import { openedShelfParts } from './shelf-scope';

/** What nobody can search: pictures, and texts in a person's own words. */
export interface FreeContent {
  pictures: number;
  texts: number;
}
/** A line a scope is chosen for. `texts` stand in its body or its notes. */
export type OpenableLine = ScopeLine & FreeContent;
/** A purchase, with the lines of the machine's log that draw from it. */
export interface OpenablePurchase {
  line: OpenableLine;
  usedBy: readonly number[];
  /** What was said of it later, on the shelf's log. */
  saidOfIt?: readonly OpenableLine[];
}

export interface ScopeEffect extends FreeContent {
  opened: number;
  withheld: number;
}

/**
 * What a scope would do, before anything is made: how many entries it opens and how many it shows as withheld, and
 * how many pictures and texts stay open that may show a name, a price or a plate.
 *
 * @example scopeEffect(usualScope, lines, purchases).withheld // 0
 */
export function scopeEffect(
  scope: Scope,
  lines: readonly OpenableLine[],
  purchases: readonly OpenablePurchase[],
): ScopeEffect {
  const parts = openedParts(scope, lines);
  const isOpen = (seq: number) => parts.get(seq)?.has('body') === true;
  const effect = { opened: 0, withheld: 0, pictures: 0, texts: 0 };
  const count = (line: OpenableLine, has: ReadonlySet<string>) => {
    if (has.has('attachments')) effect.pictures += line.pictures;
    if (has.has('body')) effect.texts += line.texts;
  };
  for (const line of lines) {
    if (isOpen(line.seq)) effect.opened += 1;
    else effect.withheld += 1;
    count(line, parts.get(line.seq) ?? new Set());
  }
  for (const { line, usedBy, saidOfIt = [] } of purchases) {
    if (!usedBy.some(isOpen)) continue;
    const onShelf = openedShelfParts(scope, [line, ...saidOfIt], new Set([line.seq]));
    for (const one of [line, ...saidOfIt]) count(one, onShelf.get(one.seq) ?? new Set());
  }
  return effect;
}
