import { adherenceOf, adherenceSummary, type AdherenceInterval, type AdherenceSummary } from '@/lib/domain/adherence';
import { checkTitle } from '@/lib/domain/checks';
import { delayInDays, localDateOf } from '@/lib/domain/instants';
import { latestReading, type OdometerReading } from '@/lib/domain/odometer';
import type { DoneService, MachineHistory } from '@/lib/domain/schedule-limits';
import { balanceAfter, lotAmount } from '@/lib/domain/shelf';
import { convert, formatAmount, isUnitCode, sumAmounts, units } from '@/lib/domain/units';
import type { Amount, Draw, Odometer, ScheduleItem, Source } from '@/lib/evidence/format';
import type { EntryView, RecordView } from '@/lib/services/record-view';
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
  /** Null: it stands open now, or is about the record as a whole. */
  seq: number | null;
  /** Not one entry's, and no work mends it. */
  isWhole?: true;
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

const isStampedByOthers = ({ tokens }: EntryView) => tokens.some(({ isOwnAuthority }) => !isOwnAuthority);
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
    gaps: [...wholeGaps(record), ...gapsOf(items, services)],
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
    const isJudged = intervals.some(({ result }) => result === 'in-time');
    return summary.late === 0 && summary.withinGrace === 0 && summary.notKnown === 0 && isJudged;
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
  const used = new Set(lots.filter(({ drawn }) => drawn.length > 0).map(({ what }) => what));
  // Every line of the receipts printed here counts as bought, so that adding them up gives the same figure.
  const covered = [...used].map((what) => {
    const same = lots.filter((lot) => lot.what === what && lot.bought !== null);
    const drawn = same.flatMap((lot) => lot.drawn);
    const bought = sumSafely(same.flatMap((lot) => lot.bought ?? []));
    const drawnSum = sumSafely(drawn, bought?.unit);
    const receipts = new Set(same.map(({ receipt }) => receipt)).size;
    const times = new Set(drawn.map(({ seq }) => seq)).size;
    const isComparable =
      bought !== null && drawnSum !== null && units[bought.unit].dimension === units[drawnSum.unit].dimension;
    return {
      what,
      bought: `${amountWords(bought)}, ${counted(receipts, 'receipt', 'receipts')}`,
      used: `${amountWords(drawnSum)}, ${counted(times, 'service', 'services')}`,
      left: isComparable ? amountWords(balanceAfter(bought, [drawnSum])) : '',
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

/** What a sceptical reader asks before looking at any entry: whose limits, whose clock, and what was withdrawn. */
function wholeGaps({ entries, terms }: RecordView): Gap[] {
  const whole = (sentence: string): Gap => ({ seq: null, isWhole: true, sentence });
  const stamped = entries.filter(isStampedByOthers).length;
  const struck = entries.filter(({ struckBy }) => struckBy !== null).map(({ seq }) => seq);
  const named = struck.length === 1 ? `Entry ${struck[0]} is` : `Entries ${listed(struck.map(String), 'others')} are`;
  return [
    ...(stamped === 0
      ? [whole('No time is proven independently: every time here is this installation’s own word.')]
      : []),
    ...sourceGaps(terms).map(whole),
    ...(struck.length === 0
      ? []
      : [whole(`${named} struck: withdrawn with a reason, still readable, not counted here.`)]),
  ];
}

function sourceGaps(terms: RecordView['terms']): string[] {
  if (terms === null) return ['No terms are opened, so nothing is said of what was due.'];
  const { schedule, fluidPoints, fasteners, parts, warranty } = terms;
  const isUnnamed = ({ source: { kind, title } }: { source: Source }) =>
    kind === 'common-practice' || title === undefined;
  const limits = schedule.filter(isUnnamed).length;
  const lines = [...fluidPoints, ...fasteners, ...parts];
  const figures = lines.filter(isUnnamed).length;
  const own = warranty.filter(isUnnamed).map(({ title }) => title);
  return [
    ...(limits === 0
      ? []
      : [`${limits} of ${schedule.length} limits of the schedule name no source: “in time” is by the owner’s terms.`]),
    ...(figures === 0 ? [] : [`${figures} of ${lines.length} lines of the spec sheet name no source.`]),
    ...own.map((title) => `The limits of the ${title} name no source.`),
  ];
}

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
  const stamped = record.entries.filter(isStampedByOthers).length;
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
