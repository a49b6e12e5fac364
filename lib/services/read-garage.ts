import 'server-only';
import { changesOf, openDraftsOf } from '@/db/queries/drafts';
import { machinesOf } from '@/db/queries/machines';
import { shelvesOf } from '@/db/queries/shelves';
import type { DraftRow } from '@/db/models/drafts';
import type { MachineRow } from '@/db/models/machines';
import type { PersonRow } from '@/db/models/people';
import { latestReading, type OdometerReading } from '@/lib/domain/odometer';
import type { Lot } from '@/lib/domain/shelf';
import { isUnitCode } from '@/lib/domain/units';
import { foldChanges, worksheetFrom, type Fields } from '@/lib/domain/worksheet';
import type { TermsBody, UnitCode } from '@/lib/evidence/format';
import { machineName } from './list-machines';
import { readHistory } from './read-history';
import { shelfWithLots } from './read-shelf-lots';
import { shellOf, type ShellData } from './read-shell';
import { whatIsDue } from './what-is-due';

export interface GarageMachineView {
  id: string;
  name: string;
  relation: 'owner' | 'helper';
  timeZone: string;
  terms: TermsBody | null;
  termsSeq: number | null;
  odometerUnit: UnitCode;
  lastReading: OdometerReading | null;
  due: { item: string; title: string; words: string; isDue: boolean }[];
}
/** What the offline shell keeps: enough to work without signal. */
export interface GarageData {
  person: {
    id: string;
    name: string;
    isSteward: boolean;
    distanceUnit: string;
    volumeUnit: string;
    torqueUnit: string;
    timeZone: string;
  };
  machines: GarageMachineView[];
  shelves: { id: string; name: string; lots: Lot[] }[];
  drafts: {
    id: string;
    kind: DraftRow['kind'];
    subject: string;
    changedAt: string;
    title: string;
    refersToSeq: number | null;
  }[];
  demo: ShellData['demo'];
}

/** Everything a person may work with on a device, in one answer. */
export async function readGarage({ person }: { person: PersonRow }): Promise<GarageData> {
  const held = await machinesOf(person.id);
  const shelves = await shelvesOf(person.id);
  const open = await openDraftsOf([...held.map(({ machine }) => machine.id), ...shelves.map(({ id }) => id)]);
  const drafts: GarageData['drafts'] = [];
  // One after another: a hundred drafts of megabytes at once would fill the memory.
  for (const draft of open) drafts.push(await draftLine(draft));
  const { id, name, isSteward, distanceUnit, volumeUnit, torqueUnit, timeZone } = person;
  return {
    person: { id, name, isSteward, distanceUnit, volumeUnit, torqueUnit, timeZone },
    machines: await Promise.all(held.map(({ machine, relation }) => machineView(machine, relation))),
    shelves: await Promise.all(shelves.map((shelf) => shelfWithLots(shelf.id))),
    drafts,
    demo: (await shellOf(person)).demo,
  };
}

async function machineView(machine: MachineRow, relation: 'owner' | 'helper'): Promise<GarageMachineView> {
  const history = await readHistory(machine.id);
  return {
    id: machine.id,
    name: machineName(machine),
    relation,
    timeZone: machine.timeZone,
    terms: history.terms,
    termsSeq: history.termsSeq,
    odometerUnit: isUnitCode(machine.distanceUnit) ? machine.distanceUnit : '[mi_i]',
    lastReading: latestReading(history.readings) ?? null,
    due: whatIsDue(machine, history).map(({ item, title, words, isDue }) => ({ item, title, words, isDue })),
  };
}

async function draftLine(draft: DraftRow): Promise<GarageData['drafts'][number]> {
  const fields = foldChanges(await changesOf(draft.id));
  const { id, kind, subjectId, changedAt, refersToSeq } = draft;
  return { id, kind, subject: subjectId, changedAt, title: draftTitle(draft, fields), refersToSeq };
}

/**
 * What a draft is called in a list: what its person called it, else what it holds.
 *
 * @example draftTitle({ kind: 'worksheet', refersToSeq: null }, { 'tasks/a/title': 'Engine oil and filter' }) // 'Engine oil and filter'
 */
export function draftTitle({ kind, refersToSeq }: Pick<DraftRow, 'kind' | 'refersToSeq'>, fields: Fields): string {
  if (kind === 'addendum') return `Addendum to entry ${refersToSeq}, not sealed`;
  if (kind === 'receipt') return fields['supplier/name'] ?? fields.supplier ?? 'Receipt';
  const { title, tasks } = worksheetFrom(fields);
  const named = tasks.flatMap((task) => task.title ?? []);
  if (title !== undefined) return title;
  return named.length === 0 ? 'Worksheet' : named.join(', ');
}
