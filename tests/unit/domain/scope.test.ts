import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  closedChoices,
  forSaleScope,
  narrowestScope,
  openedParts,
  partsOpened,
  usualScope,
  type Scope,
  type ScopeLine,
} from '@/lib/domain/scope';
import { machineKinds, partNames, type EntryKind, type PartName } from '@/lib/evidence/format';

// The rules are this project's own (evidence format, section 3: a scope only chooses which parts are opened).
const line = (seq: number, kind: EntryKind, given: Partial<ScopeLine> = {}): ScopeLine => ({
  seq,
  kind,
  refersTo: null,
  items: [],
  finishedOn: null,
  parts: ['attachments', 'author', 'body', 'notes'],
  naming: [],
  identifying: [],
  hasPapers: false,
  ...given,
});
const opening = line(0, 'opening', { parts: ['author', 'body', 'identity'] });
const terms = line(1, 'terms', { parts: ['author', 'body'] });
const oil = line(2, 'service', { items: ['engine-oil'], finishedOn: '2025-04-12' });
const tyres = line(3, 'service', { items: ['tyres', 'brakes'], finishedOn: '2026-04-12' });
const reading = line(4, 'reading', { finishedOn: '2026-05-01' });
const log = [opening, terms, oil, tyres, reading];
const everything: Scope = { closed: [] };
const opened = (scope: Scope, lines: ScopeLine[] = log) =>
  [...openedParts(scope, lines)].filter(([, parts]) => parts.has('body')).map(([seq]) => seq);
const partsOf = (scope: Scope, seq: number, lines: ScopeLine[] = log) =>
  [...(openedParts(scope, lines).get(seq) ?? [])].sort();

describe('which entries a scope opens', () => {
  it('opens all of them where nothing is chosen', () => {
    expect(opened(everything)).toEqual([0, 1, 2, 3, 4]);
  });
  it('opens only the numbers chosen, with the opening, the terms and strikes', () => {
    const strike = line(5, 'strike', { refersTo: 3 });
    expect(opened({ entries: { seqs: [2] }, closed: [] }, [...log, strike])).toEqual([0, 1, 2, 5]);
  });
  it('opens services that did one of the items chosen, and closes what did none', () => {
    expect(opened({ entries: { items: ['brakes'] }, closed: [] })).toEqual([0, 1, 3]);
    expect(opened({ entries: { items: ['gearbox'] }, closed: [] })).toEqual([0, 1]);
  });
  it.each([
    ['the day before it', '2025-04-13', '2026-04-30', [0, 1, 3]],
    ['the very first and last day', '2025-04-12', '2026-05-01', [0, 1, 2, 3, 4]],
    ['only from a day on', '2026-04-12', undefined, [0, 1, 3, 4]],
    ['only until a day', undefined, '2025-04-12', [0, 1, 2]],
  ])('opens what was finished within a period: %s', (_title, from, to, seqs) => {
    expect(opened({ entries: { ...(from ? { from } : {}), ...(to ? { to } : {}) }, closed: [] })).toEqual(seqs);
  });
  it('closes what names no day where a period is chosen', () => {
    const handover = line(5, 'handover');
    expect(opened({ entries: { from: '2000-01-01' }, closed: [] }, [...log, handover])).not.toContain(5);
  });
  it('lets each filter narrow the others', () => {
    expect(opened({ entries: { seqs: [2, 3], items: ['engine-oil'], from: '2026-01-01' }, closed: [] })).toEqual([
      0, 1,
    ]);
  });
  it.each(['addendum', 'countersignature', 'signature', 'key'] as const)(
    'opens a %s with the entry it is about',
    (kind) => {
      const lines = [
        ...log,
        line(5, kind, { refersTo: 2 }),
        line(6, kind, { refersTo: 3 }),
        line(7, kind, { refersTo: 6 }),
      ];
      expect(opened({ entries: { seqs: [3] }, closed: [] }, lines)).toEqual([0, 1, 3, 6, 7]);
      // Whatever order they are given in.
      expect(opened({ entries: { seqs: [3] }, closed: [] }, lines.toReversed()).sort()).toEqual([0, 1, 3, 6, 7]);
    },
  );
  it('opens a key that is about no entry: later signatures are checked with it', () => {
    expect(opened(narrowestScope, [...log, line(5, 'key')])).toEqual([0, 1, 5]);
  });
  it('opens nothing of a closed entry, and still lists it', () => {
    const parts = openedParts({ entries: { seqs: [3] }, closed: [] }, log);
    expect(parts.get(2)?.size).toBe(0);
    expect([...parts.keys()]).toEqual([0, 1, 2, 3, 4]);
  });
});

describe('which parts a scope opens', () => {
  it('opens everything but prices by itself', () => {
    expect(partsOf(usualScope, 2)).toEqual(['attachments', 'author', 'body', 'notes']);
    const purchase = line(9, 'purchase', {
      parts: ['attachments', 'author', 'body', 'prices', 'supplier'],
      hasPapers: true,
    });
    expect([...partsOpened(usualScope, purchase)]).toEqual(['attachments', 'author', 'body', 'supplier']);
  });
  it.each([
    ['prices', ['attachments', 'author', 'body', 'notes', 'supplier']],
    ['supplier', ['attachments', 'author', 'body', 'notes', 'prices']],
    ['names', ['attachments', 'body', 'notes', 'prices', 'supplier']],
    ['notes', ['attachments', 'author', 'body', 'prices', 'supplier']],
    // On a purchase, the pictures are of papers.
    ['pictures', ['attachments', 'author', 'body', 'notes', 'prices', 'supplier']],
    ['receipt-pictures', ['author', 'body', 'notes', 'prices', 'supplier']],
  ] as const)('keeps %s of a purchase closed', (choice, parts) => {
    const whole = line(9, 'purchase', { parts: ['attachments', 'author', 'body', 'notes', 'prices', 'supplier'] });
    expect([...partsOpened({ closed: [choice] }, whole)]).toEqual(parts);
  });
  it('keeps the VIN closed, and what says it in words, but never the opening itself', () => {
    const telling = line(5, 'service', { identifying: ['notes'] });
    const lines = [{ ...opening, identifying: ['body', 'identity'] } as ScopeLine, telling];
    expect(partsOf({ closed: ['vin'] }, 0, lines)).toEqual(['author', 'body']);
    expect(partsOf({ closed: ['vin'] }, 5, lines)).toEqual(['attachments', 'author', 'body']);
  });
  it('closes an entry whose body spells out a name, once names stay closed', () => {
    const old = line(5, 'countersignature', { refersTo: 2, naming: ['author', 'body'] });
    expect(partsOf({ closed: ['names'] }, 5, [...log, old])).toEqual([]);
    expect(partsOf(usualScope, 5, [...log, old])).toContain('body');
  });
  it('closes what is about an entry that had to stay closed', () => {
    const named = line(5, 'service', { naming: ['body'] });
    expect(opened({ closed: ['names'] }, [named, line(6, 'addendum', { refersTo: 5 })])).toEqual([]);
  });
  it('keeps contact data closed with the names', () => {
    const handover = line(5, 'handover', { parts: ['author', 'body', 'contact'] });
    expect(partsOf(usualScope, 5, [handover])).toContain('contact');
    expect(partsOf(forSaleScope, 5, [handover])).toEqual(['body']);
  });
  it('closes all pictures of an entry with a paper among them, once papers stay closed', () => {
    const withPaper = { ...oil, hasPapers: true };
    expect(partsOf(forSaleScope, 2, [oil])).toContain('attachments');
    expect(partsOf(forSaleScope, 2, [withPaper])).not.toContain('attachments');
    expect(partsOf({ closed: ['pictures'] }, 2, [oil])).not.toContain('attachments');
  });
});

describe('whatever is chosen', () => {
  const subset = <T>(all: readonly T[]) => fc.subarray([...all]);
  const lines = fc
    .array(
      fc.record({
        kind: fc.constantFrom(...machineKinds),
        about: fc.option(fc.nat(20), { nil: null }),
        items: subset(['engine-oil', 'tyres']),
        finishedOn: fc.option(fc.constantFrom('2024-01-01', '2025-01-01', '2026-01-01'), { nil: null }),
        parts: subset(partNames),
        naming: subset(partNames),
        identifying: subset(partNames),
        hasPapers: fc.boolean(),
      }),
      { maxLength: 15 },
    )
    .map((list) =>
      list.map(({ about, ...rest }, seq): ScopeLine => ({
        ...rest,
        seq,
        refersTo: about === null || about >= seq ? null : about,
      })),
    );
  const filters = fc.record(
    {
      seqs: fc.array(fc.nat(15)),
      items: subset(['engine-oil', 'tyres']),
      from: fc.constantFrom('2024-01-01', '2025-01-01'),
      to: fc.constantFrom('2025-01-01', '2026-01-01'),
    },
    { requiredKeys: [] },
  );
  const scopes = fc.record({ entries: filters, closed: subset(closedChoices) });
  const isWithin = (inner: ReadonlySet<PartName>, outer: ReadonlySet<PartName>) =>
    [...inner].every((part) => outer.has(part));

  it('closing more never opens anything', () => {
    fc.assert(
      fc.property(lines, scopes, subset(closedChoices), fc.array(fc.nat(15)), (log, scope, more, fewer) => {
        const wide = openedParts(scope, log);
        const seqs = scope.entries.seqs === undefined ? fewer : scope.entries.seqs.filter((seq) => fewer.includes(seq));
        const narrow = openedParts({ entries: { ...scope.entries, seqs }, closed: [...scope.closed, ...more] }, log);
        for (const { seq } of log) expect(isWithin(narrow.get(seq)!, wide.get(seq)!)).toBe(true);
      }),
    );
  });
  it('lists every line, and opens only parts that its leaf names', () => {
    fc.assert(
      fc.property(lines, scopes, (log, scope) => {
        const parts = openedParts(scope, log);
        expect(parts.size).toBe(log.length);
        for (const one of log) expect(isWithin(parts.get(one.seq)!, new Set(one.parts))).toBe(true);
      }),
    );
  });
});
