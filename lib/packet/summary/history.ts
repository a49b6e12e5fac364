import type { OdometerReading } from '@/lib/domain/odometer';
import type { DoneService, MachineHistory } from '@/lib/domain/schedule-limits';
import { isUnitCode } from '@/lib/domain/units';
import type { Odometer } from '@/lib/evidence/format';
import type { RecordView } from '@/lib/services/record-view';
import { isService, type ServiceEntry } from '../content';

const isObject = (value: unknown): value is Record<string, unknown> => typeof value === 'object' && value !== null;
function odometerIn(value: unknown): Odometer | undefined {
  if (!isObject(value) || typeof value.value !== 'string' || typeof value.unit !== 'string') return undefined;
  if (!isUnitCode(value.unit)) return undefined;
  return {
    value: value.value,
    unit: value.unit,
    instrument: typeof value.instrument === 'number' ? value.instrument : 0,
  };
}

/** What the schedule is judged by, from what is opened and not struck. */
export function historyOf(record: RecordView, today: string): MachineHistory {
  const { firstUse, recordStarts } = record.opening;
  const readings: OdometerReading[] = [];
  const take = (on: string | undefined, odometer: Odometer | undefined) => {
    if (on !== undefined && odometer !== undefined) readings.push({ on, ...odometer });
  };
  take(firstUse?.on, firstUse?.odometer);
  take(recordStarts.on, recordStarts.odometer);
  let hours: string | undefined;
  for (const entry of record.entries) {
    if (entry.struckBy !== null) continue;
    if (isService(entry)) {
      take(entry.body?.finishedAt.date, entry.body?.odometer);
      hours = entry.body?.engineHours ?? hours;
    } else if (entry.kind === 'reading' && isObject(entry.body) && typeof entry.body.on === 'string') {
      take(entry.body.on, odometerIn(entry.body.odometer));
      if (typeof entry.body.hours === 'string') hours = entry.body.hours;
    }
  }
  return {
    ...(firstUse === undefined ? {} : { firstUse }),
    recordStarts,
    readings,
    ...(hours === undefined ? {} : { hours }),
    today,
  };
}

/** Every time a schedule item was done. */
export function doneOf(services: ServiceEntry[]): DoneService[] {
  return services.flatMap(({ seq, body }) => {
    if (body === null) return [];
    const items = new Set(
      body.tasks.flatMap(({ scheduleItem, scheduleItems }) => [
        ...(scheduleItem === undefined ? [] : [scheduleItem]),
        ...(scheduleItems ?? []),
      ]),
    );
    return [...items].map((item) => ({
      item,
      on: body.finishedAt.date,
      seq,
      ...(body.odometer === undefined ? {} : { odometer: body.odometer }),
      ...(body.engineHours === undefined ? {} : { hours: body.engineHours }),
    }));
  });
}
