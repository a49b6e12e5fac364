import 'server-only';
import type { MachineRow } from '@/db/models/machines';
import { localDateOf } from '@/lib/domain/instants';
import { dueList, type DoneService, type Due, type MachineHistory } from '@/lib/domain/schedule';
import { Decimal } from '@/lib/domain/units';
import { now } from '@/lib/ports/clock';
import type { SealedHistory, SealedService } from './read-history';

export interface DueLine {
  item: string;
  title: string;
  /** `in 640 mi, about 2 May` */
  words: string;
  isDue: boolean;
  due: Due;
}

/** Every time a schedule item was done, as the sealed services say. */
export function doneServices(services: readonly SealedService[]): DoneService[] {
  return services.flatMap(({ seq, body }) => {
    const items = new Set(body.tasks.flatMap((task) => [task.scheduleItem, ...(task.scheduleItems ?? [])]));
    return [...items].flatMap((item) =>
      item === undefined
        ? []
        : [
            {
              item,
              on: body.finishedAt.date,
              ...(body.odometer === undefined ? {} : { odometer: body.odometer }),
              ...(body.engineHours === undefined ? {} : { hours: body.engineHours }),
              seq,
            },
          ],
    );
  });
}

/** What the domain needs to know of a machine's record on a day. */
export function domainHistory(history: SealedHistory, today: string): MachineHistory {
  const hours = history.services.flatMap(({ body }) => body.engineHours ?? []);
  const most = hours.reduce<string | undefined>(
    (highest, one) => (highest === undefined || new Decimal(one).gt(highest) ? one : highest),
    undefined,
  );
  const { firstUse, recordStarts } = history.opening;
  return {
    ...(firstUse === undefined ? {} : { firstUse }),
    recordStarts,
    readings: history.readings,
    ...(most === undefined ? {} : { hours: most }),
    today,
  };
}

/** The schedule as it stands today in the machine's own time zone, the most pressing first. */
export function whatIsDue(machine: MachineRow, history: SealedHistory): DueLine[] {
  const today = localDateOf(now().toISOString(), machine.timeZone);
  const list = dueList(history.terms?.schedule ?? [], doneServices(history.services), domainHistory(history, today));
  return list.map((due) => ({
    item: due.item,
    title: due.title,
    words: due.sentence,
    isDue: due.state === 'over' || due.state === 'due-now',
    due,
  }));
}
