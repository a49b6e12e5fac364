import 'server-only';
import { changesOf, openDraftsOf } from '@/db/queries/drafts';
import { machineById } from '@/db/queries/machines';
import type { DraftRow } from '@/db/models/drafts';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';
import { formatLocalDate, localDateOf } from '@/lib/domain/instants';
import { latestReading, ridingRate } from '@/lib/domain/odometer';
import { unfinishedState } from '@/lib/domain/procedures';
import { formatDistance, units } from '@/lib/domain/units';
import { warrantyState, type WarrantyState } from '@/lib/domain/warranty';
import { foldChanges, worksheetFrom } from '@/lib/domain/worksheet';
import { notFound } from '@/lib/errors';
import { paths } from '@/lib/paths';
import { now } from '@/lib/ports/clock';
import { distanceRule, timeRule, type RuleData } from './bench-rule';
import { whatWaits, type Waiting } from './bench-waiting';
import { machineName } from './list-machines';
import { draftTitle } from './read-garage';
import { readHistory, type SealedHistory } from './read-history';
import { doneServices, whatIsDue, type DueLine } from './what-is-due';

/** A worksheet or an addendum that is not sealed yet. */
export interface OpenWorksheet {
  id: string;
  href: string;
  isAddendum: boolean;
  title: string;
  changedAt: string;
  /** The state the machine was left in: `Engine drained, not refilled: do not start.` */
  states: string[];
}
export interface Bench {
  machine: { id: string; name: string; timeZone: string };
  relation: 'owner' | 'helper';
  /** The news: what is due next. */
  headline: string;
  /** Latest reading and riding rate. */
  note: string;
  rules: RuleData[];
  due: DueLine[];
  warranty: WarrantyState[];
  worksheets: OpenWorksheet[];
  waiting: Waiting[];
}

/** A rider's home page for one machine: what is due, what is begun, what waits for somebody. */
export async function readBench(options: { person: PersonRow; machine: string }): Promise<Bench> {
  const standing = await authorise({ person: options.person, action: 'read-machine', machine: options.machine });
  const machine = await machineById(options.machine);
  if (machine === null) throw notFound('machine');
  const history = await readHistory(machine.id);
  const at = now().toISOString();
  const today = localDateOf(at, machine.timeZone);
  const due = whatIsDue(machine, history);
  const warranty = (history.terms?.warranty ?? []).map((term) =>
    warrantyState(term, history.readings, { now: at, zone: machine.timeZone }),
  );
  const context = { machine, history, due, done: doneServices(history.services), warranty, today };
  const drafts = await openDraftsOf([machine.id]);
  return {
    machine: { id: machine.id, name: machineName(machine), timeZone: machine.timeZone },
    relation: standing.machine === 'owner' ? 'owner' : 'helper',
    headline: newsOf(due),
    note: readingNote(history),
    rules: [distanceRule(context), timeRule(context)].filter((rule) => rule !== null),
    due,
    warranty,
    worksheets: await Promise.all(drafts.map(openWorksheet)),
    waiting: await whatWaits({ machine, history }),
  };
}

/**
 * What is due next, as a sentence.
 *
 * @example newsOf([{ title: 'Engine oil', words: 'in 640 mi, about 2 May', … }]) // 'Engine oil is due in 640 mi, about 2 May'
 */
export function newsOf(due: readonly DueLine[]): string {
  const [next] = due;
  if (next === undefined) return 'No schedule is entered yet';
  const verb = /(?:[^s]s| and \S+)$/i.test(next.title) ? 'are' : 'is';
  switch (next.due.state) {
    case 'none':
      return 'Nothing further is due';
    case 'unknown':
      return `${next.title} ${verb} not in this record yet`;
    case 'over':
      return `${next.title} ${verb} ${next.words}`;
    case 'due-now':
      return `${next.title} ${verb} due now`;
    default:
      return `${next.title} ${verb} due ${next.words}`;
  }
}

function readingNote({ readings }: SealedHistory): string {
  const latest = latestReading(readings);
  if (latest === undefined) return 'No odometer reading yet';
  const read = `${formatDistance(latest)} read ${formatLocalDate(latest.on)}`;
  const rate = ridingRate(readings);
  return rate === undefined
    ? read
    : `${read}, ${rate.perDay.times(7).toFixed(0)} ${units[rate.unit].label} a week lately`;
}

async function openWorksheet(draft: DraftRow): Promise<OpenWorksheet> {
  const fields = foldChanges(await changesOf(draft.id));
  const { id, kind, subjectId, refersToSeq, changedAt } = draft;
  const title = draftTitle(draft, fields);
  if (kind === 'addendum') {
    return { id, href: paths.addendum(subjectId, refersToSeq ?? 0), isAddendum: true, title, changedAt, states: [] };
  }
  const states = worksheetFrom(fields).tasks.flatMap(
    (task) => unfinishedState(task.key, Object.keys(task.steps)) ?? [],
  );
  return { id, href: paths.worksheet(id), isAddendum: false, title, changedAt, states };
}
