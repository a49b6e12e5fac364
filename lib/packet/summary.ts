import { adherenceOf, adherenceSummary, type AdherenceInterval, type AdherenceSummary } from '@/lib/domain/adherence';
import { checkTitle } from '@/lib/domain/checks';
import { delayInDays, localDateOf } from '@/lib/domain/instants';
import { latestReading, type OdometerReading } from '@/lib/domain/odometer';
import type { DoneService, MachineHistory } from '@/lib/domain/schedule-limits';
import { balanceAfter, lotAmount } from '@/lib/domain/shelf';
import { convert, formatAmount, isUnitCode, sumAmounts, units } from '@/lib/domain/units';
import type { Amount, Draw, Odometer, ScheduleItem } from '@/lib/evidence/format';
import type { RecordView } from '@/lib/services/record-view';
import { isService, purchasesOf, type PacketContent, type ServiceEntry } from './content';
import { counted, lowered, productWords } from './words';

const promptDays = 7;

export interface ItemSummary {
  item: ScheduleItem;
  intervals: AdherenceInterval[];
  summary: AdherenceSummary;
}
export interface UseSummary {
  what: string;
  bought: string;
  used: string;
  left: string;
  uncovered: string;
}
export interface Gap {
  /** Null: it stands open now, and no entry ended it. */
  seq: number | null;
  sentence: string;
}
export interface PacketSummary {
  headline: string;
  items: ItemSummary[];
  history: MachineHistory;
  now: OdometerReading | undefined;
  uses: UseSummary[];
  gaps: Gap[];
  counts: { entries: string; prompt: string; proven: string; countersigned: string };
}

const isOpen = (entry: ServiceEntry) => entry.body !== null && entry.struckBy === null;

/** What the record amounts to, from its opened entries. Struck services count for nothing. */
export function summarise({ record, madeAt, zone }: Pick<PacketContent, 'record' | 'madeAt' | 'zone'>): PacketSummary {
  const services = record.entries.filter(isService).filter(isOpen);
  const history = historyOf(record, localDateOf(madeAt, zone));
  const done = doneOf(services);
  const items = (record.terms?.schedule ?? []).map((item) => {
    const intervals = adherenceOf(item, done, history);
    return { item, intervals, summary: adherenceSummary(intervals) };
  });
  return {
    headline: headlineOf(items, services.length),
    items,
    history,
    now: latestReading(history.readings, history.today),
    uses: usesOf(record, services),
    gaps: gapsOf(items, services),
    counts: countsOf(record, services),
  };
}

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

function historyOf(record: RecordView, today: string): MachineHistory {
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

function doneOf(services: ServiceEntry[]): DoneService[] {
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

const mostNamed = 3;
function listed(titles: string[], others: string): string {
  const named = titles.length > mostNamed + 1 ? titles.slice(0, mostNamed) : titles;
  const rest = titles.length - named.length;
  const all = rest === 0 ? named : [...named, `${rest} ${others}`];
  return all.length < 2 ? (all[0] ?? '') : `${all.slice(0, -1).join(', ')} and ${all.at(-1)}`;
}

/** The news: what was late and by how much, then what was kept. */
function headlineOf(items: ItemSummary[], services: number): string {
  const late = items.filter(({ summary }) => summary.late > 0);
  const kept = items.filter(({ summary, intervals }) => {
    const isJudged = intervals.some(({ result }) => result === 'in-time' || result === 'within-grace');
    return summary.late === 0 && summary.notKnown === 0 && isJudged;
  });
  const keptWords =
    kept.length === 0
      ? ''
      : `${listed(
          kept.map(({ item }) => lowered(item.title)),
          'other items',
        )} always in time`;
  if (late.length === 0) {
    if (kept.length === 0) return `${counted(services, 'service is', 'services are')} in this record.`;
    return `${keptWords.charAt(0).toUpperCase()}${keptWords.slice(1)}.`;
  }
  const lateWords =
    late.length <= 2
      ? late
          .map(({ item, summary }, i) => `${i === 0 ? item.title : lowered(item.title)} ${summary.sentence}`)
          .join('; ')
      : `Late: ${listed(
          late.map(({ item }) => lowered(item.title)),
          'other items',
        )}`;
  return `${lateWords}${keptWords === '' ? '' : `; ${keptWords}`}.`;
}

interface Use {
  seq: number;
  what: string;
  draws: Draw[];
  uncovered?: Amount;
}

function usesIn(services: ServiceEntry[]): Use[] {
  return services.flatMap(({ seq, body }) =>
    (body?.tasks ?? []).flatMap((task) => [
      ...task.fills.map((fill) => ({
        ...fill,
        seq,
        what: productWords(fill.product ?? fill.pointTitle, fill.grade),
      })),
      ...task.parts.map((part) => ({ ...part, seq, what: [part.name, part.partNumber].filter(Boolean).join(', ') })),
    ]),
  );
}

/** Purchases against use, a line for each product bought, then one for each thing used without a receipt. */
function usesOf(record: RecordView, services: ServiceEntry[]): UseSummary[] {
  const uses = usesIn(services);
  const draws = uses.flatMap(({ seq, draws }) => draws.map((draw) => ({ ...draw, seq })));
  const lots = purchasesOf(record).flatMap(({ log, seq, body }) =>
    body.lines.map((line) => {
      const what = productWords(line.product, line.kind === 'fluid' ? line.grade : line.partNumber);
      const drawn = draws.filter(
        (one) => one.purchase.log === log && one.purchase.seq === seq && one.line === line.line,
      );
      return { what, receipt: `${log} ${seq}`, bought: boughtIn(line), drawn };
    }),
  );
  const drawnLots = lots.filter(({ drawn, bought }) => drawn.length > 0 && bought !== null);
  const covered = [...new Set(drawnLots.map(({ what }) => what))].map((what) => {
    const same = drawnLots.filter((lot) => lot.what === what);
    const drawn = same.flatMap((lot) => lot.drawn);
    const bought = sumSafely(same.flatMap((lot) => lot.bought ?? []));
    const used = sumSafely(drawn, bought?.unit);
    const receipts = new Set(same.map(({ receipt }) => receipt)).size;
    const times = new Set(drawn.map(({ seq }) => seq)).size;
    const isComparable =
      bought !== null && used !== null && units[bought.unit].dimension === units[used.unit].dimension;
    return {
      what,
      bought: `${amountWords(bought)}, ${counted(receipts, 'receipt', 'receipts')}`,
      used: `${amountWords(used)}, ${counted(times, 'service', 'services')}`,
      left: isComparable ? amountWords(balanceAfter(bought, [used])) : '',
      uncovered: '',
    };
  });
  const without = uses.flatMap(({ what, uncovered, seq }) =>
    uncovered === undefined ? [] : [{ what, uncovered, seq }],
  );
  const bare = [...new Set(without.map(({ what }) => what))].map((what) => {
    const same = without.filter((use) => use.what === what);
    const used = amountWords(sumSafely(same.map(({ uncovered }) => uncovered)));
    const seqs = [...new Set(same.map(({ seq }) => seq))];
    const where = `${seqs.length === 1 ? 'entry' : 'entries'} ${seqs.join(', ')}`;
    return { what, bought: 'no receipt', used: `${used}, ${where}`, left: '', uncovered: 'gap' };
  });
  return [...covered, ...bare];
}

function boughtIn(line: Parameters<typeof lotAmount>[0]): Amount | null {
  try {
    return lotAmount(line);
  } catch {
    return null;
  }
}

/** Null where amounts of different kinds stand under one name: then no sum is claimed. */
function sumSafely(amounts: Amount[], unit?: Amount['unit']): Amount | null {
  try {
    return sumAmounts(amounts, unit);
  } catch {
    return null;
  }
}
const amountWords = (amount: Amount | null) => (amount === null ? 'several kinds' : formatAmount(amount));

/** Checks that say the same as an interval of the schedule, which is judged here by the newest terms. */
const intervalCheck = 'within-interval';

function gapsOf(items: ItemSummary[], services: ServiceEntry[]): Gap[] {
  const late = items.flatMap(({ item, intervals }) =>
    intervals
      .filter(({ result }) => result === 'late')
      .map(({ to, from, sentence }) => ({
        seq: to.seq ?? null,
        sentence: `${item.title}, since ${from.seq === undefined ? 'first use' : `entry ${from.seq}`}: ${sentence}.`,
      })),
  );
  const checks = services.flatMap(({ seq, body }) =>
    (body?.checks ?? [])
      .filter(({ result, key }) => result === 'gap' && !(key === intervalCheck && late.some((one) => one.seq === seq)))
      .map(({ detail, key }) => ({ seq, sentence: ended(detail === '' ? checkTitle(key) : detail) })),
  );
  return [...late, ...checks].sort((a, b) => (a.seq ?? Number.MAX_SAFE_INTEGER) - (b.seq ?? Number.MAX_SAFE_INTEGER));
}
const ended = (text: string) => (/[.!?]$/.test(text) ? text : `${text}.`);

function countsOf(record: RecordView, services: ServiceEntry[]): PacketSummary['counts'] {
  const opened = record.entries.filter(({ withheld }) => withheld.length === 0).length;
  const prompt = services.filter(
    ({ body, sealedAt }) => body !== null && delayInDays(body.finishedAt, sealedAt) <= promptDays,
  );
  const stamped = record.entries.filter(({ tokens }) => tokens.some(({ isOwnAuthority }) => !isOwnAuthority)).length;
  const countersigned = services.filter(({ countersignatures }) => countersignatures.length > 0).length;
  return {
    entries: `${opened} of ${record.log.size}`,
    prompt: `${prompt.length} of ${services.length}`,
    proven: stamped === 0 ? 'none' : `${stamped} to check`,
    countersigned: `${countersigned} of ${services.length}`,
  };
}

/** A distance as a plain number of one unit, for drawing only. */
export const drawnFigure = (odometer: { value: string; unit: Amount['unit'] }, unit: Amount['unit']): number =>
  convert(odometer.value, odometer.unit, unit).toNumber();
