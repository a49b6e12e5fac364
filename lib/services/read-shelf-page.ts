import 'server-only';
import { findLog } from '@/db/queries/logs';
import { drawsFrom, struckEntriesOf } from '@/db/queries/lots';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';
import { isUnitCode } from '@/lib/domain/units';
import { notFound } from '@/lib/errors';
import type { Amount } from '@/lib/evidence/format';
import { listMachines } from './list-machines';
import { readShelf } from './read-record';
import { lotsOfLog, type ShelfLot } from './read-shelf-lots';
import type { LogView, ShelfEntryView } from './record-view';

export interface ShelfPage {
  id: string;
  name: string;
  relation: 'owner' | 'helper';
  log: LogView;
  /** Oldest first, used-up ones too. */
  lots: ShelfLot[];
  /** Ascending by seq. */
  entries: ShelfEntryView[];
}
/** What one entry of a machine drew from a receipt. */
export interface LotUse extends Amount {
  line: number;
  /** Null for a machine this person has nothing to do with: it is never named. */
  machine: { id: string; name: string } | null;
  seq: number;
  isStruck: boolean;
}

/** A shelf with its lots and its log, for one of its people. */
export async function readShelfPage(options: { person: PersonRow; shelf: string }): Promise<ShelfPage> {
  const standing = await authorise({ person: options.person, action: 'read-shelf', shelf: options.shelf });
  const relation = standing.shelf === 'owner' ? 'owner' : 'helper';
  const { log, name, entries } = await readShelf({ shelfId: options.shelf });
  return { id: options.shelf, name, relation, log, lots: await lotsOfLog(log.id), entries };
}

/** One line of a shelf's log with where its lots were used. Throws `not-found` when the shelf has no such line. */
export async function readShelfEntry(options: {
  person: PersonRow;
  shelf: string;
  seq: number;
}): Promise<ShelfPage & { entry: ShelfEntryView; uses: LotUse[] }> {
  const shelf = await readShelfPage(options);
  const entry = shelf.entries.find(({ seq }) => seq === options.seq);
  if (entry === undefined) throw notFound('entry');
  return { ...shelf, entry, uses: await usesOf(shelf.log.id, options) };
}

export async function usesOf(shelfLog: string, { person, seq }: { person: PersonRow; seq: number }): Promise<LotUse[]> {
  const rows = (await drawsFrom(shelfLog)).filter(({ purchaseSeq }) => purchaseSeq === seq);
  const logs = [...new Set(rows.map(({ machineLog }) => machineLog))];
  const struck = await struckEntriesOf(logs);
  const own = new Map((await listMachines(person)).map(({ id, name }) => [id, { id, name }]));
  const subjects = new Map(
    await Promise.all(logs.map(async (log): Promise<[string, string]> => [log, (await findLog(log))?.subjectId ?? ''])),
  );
  return rows.flatMap(({ machineLog, entrySeq, line, amount, unit }) =>
    isUnitCode(unit)
      ? [
          {
            line,
            amount,
            unit,
            seq: entrySeq,
            machine: own.get(subjects.get(machineLog) ?? '') ?? null,
            isStruck: struck.has(`${machineLog}:${entrySeq}`),
          },
        ]
      : [],
  );
}
