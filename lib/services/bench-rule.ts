import 'server-only';
import type { MachineRow } from '@/db/models/machines';
import { formatLocalDate } from '@/lib/domain/instants';
import { distanceLine, latestReading, type DistanceLine } from '@/lib/domain/odometer';
import type { DoneService } from '@/lib/domain/schedule';
import { convert, Decimal, formatDistance, groupThousands, isUnitCode, units } from '@/lib/domain/units';
import type { WarrantyState } from '@/lib/domain/warranty';
import type { UnitCode } from '@/lib/evidence/format';
import type { SealedHistory } from './read-history';
import type { DueLine } from './what-is-due';

/** What the drawing of a steel rule takes; positions are only drawn, so plain numbers will do. */
export interface RuleData {
  label: string;
  unit: string;
  /** `time`: positions are milliseconds since 1970. */
  kind: 'distance' | 'time';
  from: number;
  to: number;
  now?: number;
  lanes: {
    item: string;
    label: string;
    done: { at: number; title: string; seq?: number }[];
    limit?: number;
    dueText: string;
    isOver: boolean;
  }[];
  flags: { at: number; text: string; tone: 'now' | 'limit' | 'plain' }[];
}

interface RuleContext {
  machine: MachineRow;
  history: SealedHistory;
  due: DueLine[];
  done: DoneService[];
  warranty: WarrantyState[];
  today: string;
}

const drawn = (value: Decimal): number => value.toNumber();
const millisecondsOf = (date: string): number => Date.parse(`${date}T00:00:00.000Z`);
const millisecondsInMonth = 30.4375 * 86_400_000;

function doneTitle({ seq, on, odometer }: DoneService): string {
  const parts = [
    seq === undefined ? undefined : `Entry ${seq}`,
    formatLocalDate(on),
    odometer && formatDistance(odometer),
  ];
  return parts.filter(Boolean).join(', ');
}

/** Items with a distance limit, along the odometer: the total over replaced instruments. */
export function distanceRule(context: RuleContext): RuleData | null {
  const { machine, history, due, done, warranty, today } = context;
  const lines = due.filter(({ due: one }) => one.interval?.distances !== undefined || one.byDistance !== undefined);
  if (lines.length === 0) return null;
  const unit: UnitCode = isUnitCode(machine.distanceUnit) ? machine.distanceUnit : '[mi_i]';
  const line = distanceLine(history.readings, unit);
  const latest = latestReading(history.readings, today);
  const at = latest === undefined ? undefined : drawn(line.total(latest));
  const lanes = lines.map((one) => distanceLane(one, done, line, latest?.instrument ?? 0));
  const flags: RuleData['flags'] = [];
  if (latest !== undefined && at !== undefined) {
    flags.push({ at, text: `${groupThousands(latest.value)} now`, tone: 'now' });
  }
  for (const { endsAt, title } of warranty.filter(({ hasEnded }) => !hasEnded)) {
    if (endsAt === undefined) continue;
    const limit = drawn(convert(endsAt.amount, endsAt.unit, unit));
    flags.push({ at: limit, text: `${title} ends at ${formatDistance(endsAt)}`, tone: 'limit' });
  }
  const reach = [at ?? 0, ...lanes.flatMap(({ limit, done: marks }) => [limit ?? 0, ...marks.map((mark) => mark.at)])];
  // The nearest limits matter: an item due in the far future must not squeeze the rest together.
  const nearest = Math.min(...lanes.flatMap(({ limit }) => (limit !== undefined && limit > (at ?? 0) ? [limit] : [])));
  const wanted = Number.isFinite(nearest) ? Math.max(at ?? 0, nearest) * 1.35 : Math.max(...reach);
  const to = Math.max(wanted, ...lanes.flatMap(({ done: marks }) => marks.map((mark) => mark.at)), 1000);
  return {
    label: 'What is due, by distance',
    unit: units[unit].label,
    kind: 'distance',
    from: 0,
    to,
    ...(at === undefined ? {} : { now: at }),
    lanes,
    flags: flags.filter((flag) => flag.at <= to),
  };
}

function distanceLane(
  { item, title, words, isDue, due }: DueLine,
  done: DoneService[],
  line: DistanceLine,
  instrument: number,
): RuleData['lanes'][number] {
  const marks = done.flatMap((one) =>
    one.item !== item || one.odometer === undefined
      ? []
      : [
          {
            at: drawn(line.total(one.odometer)),
            title: doneTitle(one),
            ...(one.seq === undefined ? {} : { seq: one.seq }),
          },
        ],
  );
  const limit =
    due.byDistance && drawn(line.total({ value: due.byDistance.at.amount, unit: due.byDistance.at.unit, instrument }));
  return {
    item,
    label: title,
    done: marks.sort((a, b) => a.at - b.at),
    ...(limit === undefined ? {} : { limit }),
    dueText: words,
    isOver: isDue,
  };
}

/** Items limited by months alone, along the calendar. */
export function timeRule({ history, due, done, warranty, today }: RuleContext): RuleData | null {
  const lines = due.filter(
    ({ due: one }) => one.interval?.months !== undefined && one.interval.distances === undefined,
  );
  if (lines.length === 0) return null;
  const at = millisecondsOf(today);
  const lanes = lines.map(({ item, title, words, isDue, due: one }) => ({
    item,
    label: title,
    done: done
      .filter((service) => service.item === item)
      .map((service) => ({
        at: millisecondsOf(service.on),
        title: doneTitle(service),
        ...(service.seq === undefined ? {} : { seq: service.seq }),
      })),
    ...(one.byDate === undefined ? {} : { limit: millisecondsOf(one.byDate.on) }),
    dueText: words,
    isOver: isDue,
  }));
  const from = millisecondsOf(history.opening.firstUse?.on ?? history.opening.recordStarts.on);
  const limits = lanes.flatMap(({ limit }) => limit ?? []);
  const to = Math.max(at, ...limits) + 3 * millisecondsInMonth;
  const ends = warranty.flatMap(({ endsOn, title }) =>
    endsOn === undefined || millisecondsOf(endsOn) > to || millisecondsOf(endsOn) < from
      ? []
      : [{ at: millisecondsOf(endsOn), text: `${title} ends ${formatLocalDate(endsOn)}`, tone: 'limit' as const }],
  );
  return {
    label: 'What is due, by date',
    unit: 'years',
    kind: 'time',
    from,
    to,
    now: at,
    lanes,
    flags: [{ at, text: 'today', tone: 'now' }, ...ends],
  };
}
