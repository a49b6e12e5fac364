import type { EntryKind, PartName } from '@/lib/evidence/format';

/**
 * What of a record a packet or a viewing link opens. Every line stays in the bundle whatever is chosen; what is not
 * opened shows as withheld, by name, and is counted.
 */
export interface Scope {
  /** Which entries' bodies are opened; each filter narrows the others. Absent: all. */
  entries?: {
    /** Only these numbers of the machine's log. */
    seqs?: number[];
    /** Only services that did one of these schedule items. */
    items?: string[];
    /** Only what was finished on these days, YYYY-MM-DD, both included. */
    from?: string;
    to?: string;
  };
  /** Parts that stay closed on every entry and every purchase. */
  closed: ClosedChoice[];
}

/** What a rider can keep closed, in the words of the form. `receipt-pictures`: they show prices and often a name. */
export const closedChoices = ['prices', 'supplier', 'names', 'vin', 'notes', 'pictures', 'receipt-pictures'] as const;
export type ClosedChoice = (typeof closedChoices)[number];

/** Everything but prices: what a packet and a link open when nothing is chosen. */
export const usualScope: Scope = { closed: ['prices'] };

/** For a buyer: what was done and when, without who, without the VIN, without what it cost. */
export const forSaleScope: Scope = { closed: ['prices', 'names', 'vin', 'receipt-pictures'] };

/** What a scope that cannot be read opens: the opening, the terms and the strikes, and of those as little as can be. */
export const narrowestScope: Scope = { entries: { seqs: [] }, closed: [...closedChoices] };

/** What the rules need to know of a line of a log. */
export interface ScopeLine {
  seq: number;
  kind: EntryKind;
  /** The earlier line of the same log it is about. */
  refersTo: number | null;
  /** Schedule items it did. */
  items: readonly string[];
  /** When the work was finished or the reading taken, YYYY-MM-DD; null where it names no day. */
  finishedOn: string | null;
  /** The parts its leaf names. */
  parts: readonly PartName[];
  /** Of those, the ones that spell out a person's name, and those that spell out the VIN or another number of it. */
  naming: readonly PartName[];
  identifying: readonly PartName[];
  /** Its attachments hold a receipt, a work order or another paper. */
  hasPapers: boolean;
  /** It stands, and its attachments are blacked-out copies, all of them. Absent: no. */
  isBlackedOut?: boolean;
}

/** On these everything else stands, and a strike out of sight would be a withdrawal out of sight. */
const alwaysOpened: ReadonlySet<EntryKind> = new Set(['opening', 'terms', 'strike']);
/** They are opened with the entry they are about. */
const following: ReadonlySet<EntryKind> = new Set(['addendum', 'countersignature', 'signature', 'key']);
/** What the machine is and is judged by is written in lists and boxes, not in sentences about people. */
const plainBodies: ReadonlySet<EntryKind> = new Set(['opening', 'terms']);
const nothing: ReadonlySet<PartName> = new Set();

/**
 * Which parts of each line of a machine's log a scope opens, by the line's number. A line that is closed opens
 * nothing, and stays in the log as a leaf. The order of the lines given makes no difference.
 *
 * @example openedParts(forSaleScope, lines).get(7)?.has('author') // false
 */
export function openedParts(scope: Scope, lines: readonly ScopeLine[]): Map<number, ReadonlySet<PartName>> {
  const opened = new Map<number, ReadonlySet<PartName>>();
  const isOpened = (line: ScopeLine): boolean => {
    if (alwaysOpened.has(line.kind)) return true;
    if (!following.has(line.kind)) return isChosen(scope, line);
    // A key is about no entry: it is what later signatures are checked with.
    if (line.refersTo === null) return line.kind === 'key';
    return (opened.get(line.refersTo) ?? nothing).has('body');
  };
  for (const line of [...lines].sort((a, b) => a.seq - b.seq)) {
    opened.set(line.seq, isOpened(line) ? partsOpened(scope, line) : nothing);
  }
  return opened;
}

/**
 * Which parts of a line are opened once it is chosen; of a purchase, once an opened entry draws from it. Where the
 * body has to stay closed, so does the rest.
 *
 * @example partsOpened(usualScope, purchase) // Set { 'attachments', 'author', 'body', 'supplier' }
 */
export function partsOpened(scope: Scope, line: ScopeLine): ReadonlySet<PartName> {
  const closed = new Set(scope.closed);
  const isClosed = (part: PartName): boolean => {
    if (part === 'body' && plainBodies.has(line.kind)) return false;
    if (closed.has('names') && (part === 'author' || part === 'contact' || line.naming.includes(part))) return true;
    if (closed.has('vin') && (part === 'identity' || line.identifying.includes(part))) return true;
    if (part === 'attachments') return areClosed(closed, line);
    return (part === 'prices' || part === 'supplier' || part === 'notes') && closed.has(part);
  };
  const parts = new Set(line.parts.filter((part) => !isClosed(part)));
  return line.parts.includes('body') && !parts.has('body') ? nothing : parts;
}

/**
 * One part holds all attachments of a line, so one paper among them closes them all. Blacked-out copies were made to be
 * shown where the pictures are not.
 */
function areClosed(closed: ReadonlySet<ClosedChoice>, { kind, hasPapers, isBlackedOut }: ScopeLine): boolean {
  if (isBlackedOut === true) return false;
  if (kind === 'purchase' || kind === 'correction') return closed.has('receipt-pictures');
  return closed.has('pictures') || (hasPapers && closed.has('receipt-pictures'));
}

function isChosen({ entries = {} }: Scope, { seq, items, finishedOn }: ScopeLine): boolean {
  const { seqs, items: wanted, from, to } = entries;
  if (seqs !== undefined && !seqs.includes(seq)) return false;
  if (wanted !== undefined && !items.some((item) => wanted.includes(item))) return false;
  if (from === undefined && to === undefined) return true;
  if (finishedOn === null) return false;
  return (from === undefined || finishedOn >= from) && (to === undefined || finishedOn <= to);
}
