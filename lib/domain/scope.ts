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
