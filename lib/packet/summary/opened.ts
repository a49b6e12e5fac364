import type { EntryKind } from '@/lib/evidence/format';
import type { RecordView } from '@/lib/services/record-view';
import { counted } from '../words';

/** How much of the record is opened here. */
export interface Opened {
  /** Entries whose body is opened, of all there are. */
  entries: number;
  of: number;
  /** Parts kept back, over every log of the bundle: the number a checker reports, less what was erased. */
  partsWithheld: number;
  partsErased: number;
  /** Closed entries that could hold work or a reading: with any of them, no chain of intervals is whole. */
  unjudged: number;
}

/** A closed strike or countersignature changes no interval; a closed one of these may. */
const couldHoldWork: ReadonlySet<EntryKind> = new Set(['service', 'reading', 'handover']);

/** Counts what is opened, and what a verdict would have to know and cannot. */
export function openedOf({ entries, shelves, log }: RecordView): Opened {
  const isClosed = ({ body }: (typeof entries)[number]) => body === null || body === undefined;
  const inShelves = shelves.reduce((sum, { partsWithheld }) => sum + partsWithheld, 0);
  return {
    entries: entries.filter((entry) => !isClosed(entry)).length,
    of: log.size,
    partsWithheld: entries.reduce((sum, { withheld }) => sum + withheld.length, inShelves),
    partsErased: entries.reduce((sum, { erased }) => sum + erased.length, 0),
    unjudged: entries.filter((entry) => couldHoldWork.has(entry.kind) && isClosed(entry) && entry.struckBy === null)
      .length,
  };
}

/** "not judged: 21 entries withheld" */
export const notJudged = ({ unjudged }: Opened): string =>
  `not judged: ${counted(unjudged, 'entry', 'entries')} withheld`;

/** Of which services a figure is a share: of a partial view nobody may take "1 of 1" for the whole record. */
export const servicesWords = ({ unjudged }: Opened): string =>
  unjudged === 0 ? 'services that stand' : 'services opened here';

/** "14 of 35 entries opened, 98 parts withheld" */
export function openedWords({ entries, of, partsWithheld, partsErased }: Opened): string {
  const erased = partsErased === 0 ? '' : `, ${counted(partsErased, 'part', 'parts')} erased`;
  return `${entries} of ${counted(of, 'entry', 'entries')} opened, ${counted(partsWithheld, 'part', 'parts')} withheld${erased}`;
}
