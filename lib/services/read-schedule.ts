import 'server-only';
import { machineById } from '@/db/queries/machines';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';
import { localDateOf } from '@/lib/domain/instants';
import { adherenceOf, adherenceSummary, type AdherenceInterval, type AdherenceSummary } from '@/lib/domain/schedule';
import { notFound } from '@/lib/errors';
import type { ScheduleItem } from '@/lib/evidence/format';
import { now } from '@/lib/ports/clock';
import { machineName } from './list-machines';
import { readHistory } from './read-history';
import { doneServices, domainHistory, whatIsDue, type DueLine } from './what-is-due';

export interface ScheduleLine extends DueLine {
  printed: ScheduleItem;
  /** From first use until now, oldest first. */
  intervals: AdherenceInterval[];
  summary: AdherenceSummary;
}
export interface Schedule {
  machine: { id: string; name: string };
  /** The terms entry it is read from; null while no terms are sealed. */
  termsSeq: number | null;
  /** The most pressing first. */
  lines: ScheduleLine[];
}

/** The schedule of a machine with how each item was kept, for one of its people. */
export async function readSchedule(options: { person: PersonRow; machine: string }): Promise<Schedule> {
  await authorise({ person: options.person, action: 'read-machine', machine: options.machine });
  const machine = await machineById(options.machine);
  if (machine === null) throw notFound('machine');
  const history = await readHistory(machine.id);
  const today = localDateOf(now().toISOString(), machine.timeZone);
  const done = doneServices(history.services);
  const known = domainHistory(history, today);
  const printedItems = new Map(history.terms?.schedule.map((item) => [item.item, item]));
  const lines = whatIsDue(machine, history).flatMap((line): ScheduleLine[] => {
    const printed = printedItems.get(line.item);
    if (printed === undefined) return [];
    const intervals = adherenceOf(printed, done, known);
    return [{ ...line, printed, intervals, summary: adherenceSummary(intervals) }];
  });
  return { machine: { id: machine.id, name: machineName(machine) }, termsSeq: history.termsSeq, lines };
}
