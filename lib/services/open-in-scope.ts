import 'server-only';
import { readStoredLogs, type StoredLog } from '@/db/queries/entries';
import { findLogOf } from '@/db/queries/logs';
import { namesOfIds } from '@/db/queries/people';
import { isPersonId } from '@/lib/domain/person-id';
import { openedParts, type Scope, type ScopeLine } from '@/lib/domain/scope';
import { openedShelfParts } from '@/lib/domain/shelf-scope';
import { looksIdentifying, namesAnyOf, numbersAnyOf } from '@/lib/domain/spelled-out';
import { notFound } from '@/lib/errors';
import type { CountersignatureBody, IdentityPart, PartName, ServiceBody } from '@/lib/evidence/format';
import { authorOf, keepOpened, type OpenedEntry, openStoredLog } from '@/lib/services/open-stored-log';
import { purchasesDrawn, readShelvesDrawn } from '@/lib/services/purchases-drawn';
import { scopeLine, type SpelledOut } from '@/lib/services/scope-line';

/** A log with what a scope opens of it. */
export interface ScopedLog {
  stored: StoredLog;
  isOpen: (part: PartName, seq: number) => boolean;
  entries: OpenedEntry[];
}
export interface ScopedShelf extends ScopedLog {
  /** Opened purchases, each with the machine's opened entries that draw from it. */
  usedBy: Map<number, number[]>;
}
export interface ScopedRecord {
  machine: ScopedLog;
  /** Only shelves that an opened entry draws from. */
  shelves: ScopedShelf[];
  /** What the scope was asked about, for forms that show what it does. */
  lines: ScopeLine[];
  spelledOut: SpelledOut;
}

/**
 * A machine's log and those of the shelves it draws from, opened as far as a scope says: the one place that decides
 * it, for pages, bundles, packets and files alike. Who may see it is decided before this is called.
 */
export async function openInScope({ machineId, scope }: { machineId: string; scope: Scope }): Promise<ScopedRecord> {
  const log = await findLogOf(machineId);
  const [stored] = log?.subject === 'machine' ? await readStoredLogs([log.id]) : [];
  if (stored === undefined) throw notFound('machine');
  const whole = openStoredLog(stored);
  const storedShelves = await readShelvesDrawn(purchasesDrawn(whole));
  const wholeShelves = storedShelves.map((shelf) => ({ stored: shelf, whole: openStoredLog(shelf) }));

  const everything = [...whole, ...wholeShelves.flatMap((shelf) => shelf.whole)];
  const sealers = [stored, ...storedShelves].flatMap(({ entries }) => entries.map(({ sealedBy }) => sealedBy));
  const accounts = await namesOfIds([...sealers, ...everything.flatMap(idsInBody)]);
  const spelledOut = spelledOutIn(everything, accounts);
  const lines = whole.map((entry) => scopeLine(entry, spelledOut));
  const opened = openedParts(scope, lines);
  const isOpen = (part: PartName, seq: number) => opened.get(seq)?.has(part) === true;
  const entries = keepOpened(whole, isOpen);

  const drawn = purchasesDrawn(entries);
  const shelves = wholeShelves.flatMap((shelf): ScopedShelf[] => {
    const usedBy = drawn.get(shelf.stored.log.id);
    if (usedBy === undefined) return [];
    const shelfLines = shelf.whole.map((entry) => scopeLine(entry, spelledOut));
    const parts = openedShelfParts(scope, shelfLines, new Set(usedBy.keys()));
    const isShown = (part: PartName, seq: number) => parts.get(seq)?.has(part) === true;
    return [{ stored: shelf.stored, isOpen: isShown, entries: keepOpened(shelf.whole, isShown), usedBy }];
  });
  return { machine: { stored, isOpen, entries }, shelves, lines, spelledOut };
}

/** Entries of earlier versions hold names in their body: of whoever invited a shop, and of whoever did the work. */
function namesInBody(entry: OpenedEntry): string[] {
  return peopleInBody(entry).filter((name) => !isPersonId(name));
}

const idsInBody = (entry: OpenedEntry): string[] => peopleInBody(entry).filter(isPersonId);

function peopleInBody({ kind, values }: OpenedEntry): string[] {
  const body = values.get('body');
  if (body === undefined) return [];
  if (kind === 'countersignature') return [(body as CountersignatureBody).invitedBy];
  if (kind !== 'service') return [];
  return (body as ServiceBody).performedBy.filter(({ capacity }) => isPerson(capacity)).map(({ person }) => person);
}

const isPerson = (capacity: ServiceBody['performedBy'][number]['capacity']) =>
  capacity === 'owner' || capacity === 'helper';

/**
 * Whose names and which numbers the record itself knows, wherever they are spelled out in it. What was erased is known
 * to it no more, and a text that says it stays closed all the same.
 *
 * @param accounts names of those who have sealed or worked here, whose author parts may be erased
 */
function spelledOutIn(entries: OpenedEntry[], accounts: string[]): SpelledOut {
  const names = entries.flatMap((entry) => {
    const { name, sealedBy, people = [] } = authorOf(entry) ?? {};
    const names = [name, sealedBy, ...people.map((one) => one.name), ...namesInBody(entry)];
    return names.filter((one) => one !== undefined);
  });
  const numbers = entries.flatMap(({ values }) =>
    Object.values((values.get('identity') as IdentityPart | undefined) ?? {}).filter((one) => typeof one === 'string'),
  );
  const isKnown = numbersAnyOf(numbers);
  const isErased = entries.some(({ erasures }) => erasures.some(({ name }) => name === 'identity'));
  const isIdentifying = (value: unknown) => isKnown(value) || (isErased && looksIdentifying(value));
  return { isNaming: namesAnyOf([...names, ...accounts]), isIdentifying };
}
