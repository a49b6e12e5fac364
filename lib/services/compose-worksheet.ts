import 'server-only';
import { createHash } from 'node:crypto';
import type { Transaction } from '@/db/index';
import { changesOf } from '@/db/queries/drafts';
import { machineById, relationsOf } from '@/db/queries/machines';
import { shelvesOf } from '@/db/queries/shelves';
import type { DraftChangeRow, DraftRow } from '@/db/models/drafts';
import type { DrawRow } from '@/db/models/logs';
import type { MachineRow } from '@/db/models/machines';
import { people, type PersonRow, type RelationRow } from '@/db/models/people';
import { frozenChecks, serviceChecks } from '@/lib/domain/checks';
import { serviceFrom } from '@/lib/domain/service-body';
import { fieldProblems, foldChanges, worksheetFrom, type Fields, type Worksheet } from '@/lib/domain/worksheet';
import { canonicalJson } from '@/lib/evidence/canonical';
import type { Attachment, AuthorPart, NotesPart, ServiceBody } from '@/lib/evidence/format';
import { notFound } from '@/lib/errors';
import { draftAttachments } from './draft-attachments';
import { readHistory, type SealedHistory } from './read-history';
import { shelfWithLots, type ShelfLot } from './read-shelf-lots';
import type { Parts } from './sealable-parts';
import { doneServices, domainHistory } from './what-is-due';

export interface ComposedWorksheet {
  machine: MachineRow;
  worksheet: Worksheet;
  /** Absent while there are problems. */
  body?: ServiceBody;
  notes?: NotesPart;
  attachments: Attachment[];
  author: AuthorPart;
  /** By field; while there is one, nothing can be sealed. */
  problems: Record<string, string>;
  /** Everything that is sealed. */
  parts: Parts;
  /** Of what a person was shown; the checks are left out, for they tell how long ago the work was. */
  fingerprint: string;
}

/**
 * The entry a worksheet would be if it were sealed at an instant: one construction for the review page and for the
 * seal, which runs it inside its transaction.
 */
export async function composeWorksheet(options: {
  draft: DraftRow;
  person: PersonRow;
  /** UTC instant of sealing. */
  at: string;
  transaction?: Transaction;
}): Promise<ComposedWorksheet> {
  const { draft, person, at, transaction } = options;
  const machine = await machineById(draft.subjectId, transaction);
  if (machine === null) throw notFound('machine');
  const changes = await changesOf(draft.id, transaction);
  const related = await relationsOf('machine', machine.id, transaction);
  const fields = withDefaults(foldChanges(changes), { changes, related, zone: machine.timeZone });
  const worksheet = worksheetFrom(fields);
  const history = await readHistory(machine.id, transaction);
  const lots = await lotsOfOwners(related, transaction);
  const { attachments, problems: missing } = await draftAttachments({
    draftId: draft.id,
    fields,
    usualRole: 'document',
    ...(transaction ? { transaction } : {}),
  });
  const { terms, termsSeq, readings } = history;
  const problems = {
    ...fieldProblems(worksheet, { now: at, readings, lots, ...(terms === null ? {} : { terms }) }),
    ...missing,
    ...(terms === null ? { terms: 'This machine has no terms yet. Save its schedule once, then seal.' } : {}),
  };
  const named = await namesOf(fields, { changes, related, transaction });
  const others = worksheet.performedBy.flatMap(({ id, capacity }) => {
    const name = isBusiness(capacity) ? undefined : named.get(id);
    return id === person.id || name === undefined ? [] : [{ person: id, name }];
  });
  const author: AuthorPart = {
    person: person.id,
    name: person.name,
    role: 'owner',
    ...(others.length === 0 ? {} : { people: others }),
  };
  const base = { machine, worksheet, attachments, author, problems };
  if (terms === null || termsSeq === null || Object.keys(problems).length > 0) {
    return { ...base, parts: {}, fingerprint: '' };
  }
  const businesses = worksheet.performedBy.flatMap(({ id, capacity }) => {
    const name = isBusiness(capacity) ? named.get(id) : undefined;
    return name === undefined ? [] : [[id, name] as const];
  });
  const unchecked = serviceFrom({ worksheet, terms, termsSeq, lots, people: Object.fromEntries(businesses) });
  const body = { ...unchecked, checks: checksOf({ body: unchecked, history, attachments, at }) };
  const notes = worksheet.notes === undefined ? undefined : { text: worksheet.notes };
  return {
    ...base,
    body,
    ...(notes === undefined ? {} : { notes }),
    parts: { author, body, notes, attachments: attachments.length === 0 ? undefined : attachments },
    fingerprint: fingerprintOf({ author, body: unchecked, notes: notes ?? null, attachments }),
  };
}

/** Who did the work, unless somebody said otherwise: everybody who wrote in the worksheet. */
function withDefaults(
  fields: Fields,
  { changes, related, zone }: { changes: DraftChangeRow[]; related: RelationRow[]; zone: string },
): Fields {
  const given = { zone, ...fields };
  if (worksheetFrom(fields).performedBy.length > 0) return given;
  const writers = [...new Set(changes.map((change) => change.personId))];
  const capacityOf = (id: string) =>
    related.some((one) => one.personId === id && one.relation === 'owner') ? 'owner' : 'helper';
  return { ...given, ...Object.fromEntries(writers.map((id) => [`performedBy/${id}/capacity`, capacityOf(id)])) };
}

/** The name of a business stands in the body; of a person it has the id, and the name stands in the author part. */
const isBusiness = (capacity: Worksheet['performedBy'][number]['capacity']) =>
  capacity === 'shop' || capacity === 'dealer';

/** Names of those who did the work: as typed for a shop, else of people of this machine only. */
async function namesOf(
  fields: Fields,
  options: { changes: DraftChangeRow[]; related: RelationRow[]; transaction?: Transaction | undefined },
): Promise<Map<string, string>> {
  const { changes, related, transaction } = options;
  const ids = [...new Set([...changes, ...related].map(({ personId }) => personId))];
  const rows = await people.all({ id: ids }, transaction ? { transaction } : {});
  const typed = Object.entries(fields).flatMap(([field, value]) => {
    const id = /^performedBy\/([^/]+)\/name$/.exec(field)?.[1];
    return id === undefined || value.trim() === '' ? [] : [[id, value.trim()] as const];
  });
  return new Map([...typed, ...rows.map(({ id, name }) => [id, name] as const)]);
}

async function lotsOfOwners(related: RelationRow[], transaction?: Transaction): Promise<ShelfLot[]> {
  const owners = related.filter(({ relation }) => relation === 'owner');
  const ids = new Set<string>();
  for (const { personId } of owners) for (const shelf of await shelvesOf(personId, transaction)) ids.add(shelf.id);
  const lots: ShelfLot[] = [];
  for (const id of ids) lots.push(...(await shelfWithLots(id, transaction)).lots);
  return lots;
}

function checksOf(options: { body: ServiceBody; history: SealedHistory; attachments: Attachment[]; at: string }) {
  const { body, history, attachments, at } = options;
  const { today: _, ...known } = domainHistory(history, body.finishedAt.date);
  const terms = history.terms;
  if (terms === null) return [];
  const sources = { body, terms, attachments, sealedAt: at, done: doneServices(history.services), history: known };
  return frozenChecks(serviceChecks(sources));
}

function fingerprintOf(shown: unknown): string {
  return createHash('sha256').update(canonicalJson(shown)).digest('hex');
}

/** What an entry takes from lots, as rows: from them, and not from the bodies, balances are counted. */
export function drawRowsOf(body: ServiceBody, entry: { log: string; seq: number }): DrawRow[] {
  const draws = body.tasks.flatMap((task) => [...task.fills, ...task.parts].flatMap((use) => use.draws));
  return draws.map(({ purchase, line, amount, unit }, position) => ({
    shelfLog: purchase.log,
    purchaseSeq: purchase.seq,
    line,
    machineLog: entry.log,
    entrySeq: entry.seq,
    position,
    amount,
    unit,
    drawnOn: body.finishedAt.date,
  }));
}
