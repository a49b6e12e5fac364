import 'server-only';
import { readStoredLogs, type StoredLog } from '@/db/queries/entries';
import { findLogOf } from '@/db/queries/logs';
import { usualScope, type Scope } from '@/lib/domain/scope';
import { notFound } from '@/lib/errors';
import type {
  CountersignatureBody,
  IdentityPart,
  OpeningBody,
  ShelfOpeningBody,
  TermsBody,
} from '@/lib/evidence/format';
import { entryTitle } from '@/lib/services/entry-title';
import { machineName } from '@/lib/services/list-machines';
import { openInScope } from '@/lib/services/open-in-scope';
import {
  attachmentsOf,
  authorOf,
  logView,
  notesOf,
  type OpenedEntry,
  openStoredLog,
} from '@/lib/services/open-stored-log';
import { withOwnSignatures } from '@/lib/services/own-signatures';
import type { BodyOf, EntryView, LogView, RecordView, ShelfEntryView } from '@/lib/services/record-view';
import { purchaseViews } from '@/lib/services/purchase-view';
import { type NameOf, nameOfPeople, withInviter, withPerformers } from '@/lib/services/names-of-people';

/**
 * A machine's record as far as a scope opens it, made from its leaves and those of the purchases it drew from. The
 * usual scope withholds prices: the same view is shown to readers. Who may see it is decided before this is called.
 */
export async function readRecord({
  machineId,
  scope = usualScope,
}: {
  machineId: string;
  scope?: Scope;
}): Promise<RecordView> {
  const { machine, shelves: drawnFrom } = await openInScope({ machineId, scope });
  const { stored, entries: opened } = machine;
  const opening = opened[0]?.values.get('body') as OpeningBody | undefined;
  if (opening === undefined) throw new Error(`The opening of log ${stored.log.id} cannot be read.`);

  const termsBySeq = new Map<number, TermsBody>();
  for (const { kind, leaf, values } of opened) {
    const terms = kind === 'terms' ? (values.get('body') as TermsBody | undefined) : undefined;
    if (terms !== undefined) termsBySeq.set(leaf.seq, terms);
  }
  const newestTerms = opened.findLast(({ leaf, struckBy }) => struckBy === null && termsBySeq.has(leaf.seq));
  const shelves = drawnFrom.map(({ stored: shelf, entries, usedBy }) => {
    const purchases = purchaseViews(entries, usedBy).filter(({ seq }) => usedBy.has(seq));
    return { log: logView(shelf), purchases, size: shelf.entries.length, partsWithheld: partsWithheldIn(entries) };
  });
  const { make, model, modelYear, kindOfMachine } = opening;
  return {
    machine: {
      id: machineId,
      name: machineName({ make, model, modelYear: modelYear ?? null }),
      make,
      model,
      ...(modelYear === undefined ? {} : { modelYear }),
      kind: kindOfMachine,
    },
    identity: (opened[0]?.values.get('identity') as IdentityPart | undefined) ?? null,
    opening,
    terms: newestTerms === undefined ? null : (termsBySeq.get(newestTerms.leaf.seq) ?? null),
    termsBySeq,
    log: logView(stored),
    entries: entryViews(opened),
    shelves,
  };
}

/** A shelf's whole log, for its owners: every purchase with its prices. */
export async function readShelf({
  shelfId,
}: {
  shelfId: string;
}): Promise<{ log: LogView; name: string; entries: ShelfEntryView[] }> {
  const stored = await readLogOf('shelf', shelfId);
  const opened = openStoredLog(stored);
  const opening = opened[0]?.values.get('body') as ShelfOpeningBody | undefined;
  const purchases = new Map(purchaseViews(opened).map((one) => [one.seq, one]));
  return {
    log: logView(stored),
    name: opening?.name ?? 'Shelf',
    entries: opened.map((entry): ShelfEntryView => {
      const { kind, leaf, leafHash, values, tokens, struckBy, withheld, erasures } = entry;
      const parts = [...values.keys()];
      const marks = { struckBy, withheld, erasures, parts };
      const base = { log: leaf.log, seq: leaf.seq, kind, sealedAt: leaf.sealedAt, leafHash, tokens, ...marks };
      if (kind === 'opening')
        return { ...base, ...(opening === undefined ? {} : { opening }), author: authorOf(entry) };
      const purchase = purchases.get(leaf.seq);
      const body = kind === 'purchase' ? undefined : values.get('body');
      return {
        ...base,
        ...(purchase === undefined ? {} : { purchase }),
        ...(body === undefined ? {} : { body }),
        ...(kind === 'purchase' ? {} : { attachments: attachmentsOf(entry) }),
        author: authorOf(entry),
        refersTo: leaf.refersTo,
      };
    }),
  };
}

async function readLogOf(subject: 'machine' | 'shelf', subjectId: string): Promise<StoredLog> {
  const log = await findLogOf(subjectId);
  const [stored] = log?.subject === subject ? await readStoredLogs([log.id]) : [];
  if (stored === undefined) throw notFound(subject);
  return stored;
}

function entryViews(opened: OpenedEntry[]): EntryView[] {
  const referring = new Map<number, OpenedEntry[]>();
  for (const entry of opened) {
    const target = entry.leaf.refersTo?.seq;
    if (target !== undefined && entry.struckBy === null) {
      referring.set(target, [...(referring.get(target) ?? []), entry]);
    }
  }
  const nameOf = nameOfPeople(opened.map(authorOf));
  const views = opened.map((entry) => entryView(entry, referring.get(entry.leaf.seq) ?? [], nameOf));
  return withOwnSignatures(views, opened);
}

const partsWithheldIn = (entries: OpenedEntry[]): number =>
  entries.reduce((sum, { withheld }) => sum + withheld.length, 0);

function entryView(entry: OpenedEntry, referring: OpenedEntry[], nameOf: NameOf): EntryView {
  const { leaf, leafHash, kind, values, withheld, erasures, tokens, stampsToCome, struckBy } = entry;
  const countersignatures = referring.flatMap((other) => {
    const body = other.kind === 'countersignature' ? other.values.get('body') : undefined;
    if (body === undefined) return [];
    const { seq, sealedAt } = other.leaf;
    return [{ seq, sealedAt, author: authorOf(other), body: withInviter(body as CountersignatureBody, nameOf) }];
  });
  const isCountersigned = referring.some((other) => other.kind === 'countersignature');
  const standing = isCountersigned ? 'countersigned' : tokens.length === 0 ? 'waiting' : 'sealed';
  const body = readableBody({ kind, body: values.get('body') ?? null } as BodyOf, nameOf);
  return {
    ...body,
    seq: leaf.seq,
    title: entryTitle(entry),
    sealedAt: leaf.sealedAt,
    leafHash,
    previous: leaf.previous,
    refersTo: leaf.refersTo,
    author: authorOf(entry),
    attachments: attachmentsOf(entry),
    notes: notesOf(entry),
    withheld,
    erased: erasures.map(({ name }) => name),
    erasures,
    tokens,
    stampsToCome,
    countersignatures,
    struckBy,
    addenda: referring.filter((other) => other.kind === 'addendum').map((other) => other.leaf.seq),
    state: struckBy === null ? standing : 'struck',
  };
}

/** The leaf says the kind; the body was sealed as that kind's. People are named as far as author parts are opened. */
function readableBody(sealed: BodyOf, nameOf: NameOf): BodyOf {
  if (sealed.body === null) return sealed;
  if (sealed.kind === 'service') return { ...sealed, body: withPerformers(sealed.body, nameOf) };
  return sealed.kind === 'countersignature' ? { ...sealed, body: withInviter(sealed.body, nameOf) } : sealed;
}
