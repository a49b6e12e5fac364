import type {
  Amount,
  Check,
  Draw,
  Fill,
  LocalMoment,
  PartUse,
  ServiceBody,
  Task,
  TermsBody,
} from '@/lib/evidence/format';
import { procedureFor } from './procedures';
import { balanceAfter, type Lot } from './shelf';
import { Decimal, parseNumber, sumAmounts } from './units';
import type {
  Worksheet,
  WorksheetAmount,
  WorksheetDraw,
  WorksheetFill,
  WorksheetPart,
  WorksheetTask,
} from './worksheet';

export interface ServiceSources {
  /** One `fieldProblems` finds nothing in. */
  worksheet: Worksheet;
  /** The terms in force, and the number of their entry. */
  terms: TermsBody;
  termsSeq: number;
  /** The shelf's lots with their balances before this worksheet. */
  lots: readonly Lot[];
  /** What is sealed for a person's id, usually the name; an id without one is sealed as it is. */
  people?: Readonly<Record<string, string>>;
  checks?: readonly Check[];
}

/** What an entry states when the rider wrote no statement of their own. */
export const defaultStatement = 'The work was done as recorded here.';

/**
 * The body to be sealed for a worksheet: figures as entered with the decimal mark made a point, specifications copied
 * from the terms, draws resolved with each lot's balance before and after, and what no lot covers. Members that do not
 * apply are left out, never null.
 *
 * @throws RangeError for a worksheet that still has problems
 * @example serviceFrom({ worksheet, terms, termsSeq: 1, lots: [] }).title // 'Engine oil and filter'
 */
export function serviceFrom({
  worksheet,
  terms,
  termsSeq,
  lots,
  people = {},
  checks = [],
}: ServiceSources): ServiceBody {
  const { finishedAt, startedAt, odometer, engineHours, zone } = worksheet;
  if (finishedAt.date === undefined || zone === undefined)
    throw new RangeError('A service needs the day it was finished, and a zone.');
  const draw = drawResolver(lots);
  const tasks = worksheet.tasks.map((task) => taskFrom(task, { terms, draw, recorded: worksheet.recorded }));
  return {
    termsSeq,
    recorded: worksheet.recorded,
    ...(startedAt.date === undefined ? {} : { startedAt: moment(startedAt.date, startedAt.time, zone) }),
    finishedAt: moment(finishedAt.date, finishedAt.time, zone),
    ...odometerFrom(odometer),
    ...(engineHours === undefined ? {} : { engineHours: decimal(engineHours) }),
    performedBy: worksheet.performedBy.map(({ id, capacity }) => ({
      person: Object.hasOwn(people, id) ? (people[id] ?? id) : id,
      capacity,
    })),
    ...(worksheet.workOrder === undefined ? {} : { workOrder: worksheet.workOrder }),
    title: worksheet.title ?? titleOf(tasks.map(({ title }) => title)),
    tasks,
    checks: [...checks],
    statement: worksheet.statement ?? defaultStatement,
  };
}

/**
 * The title of an entry made of its tasks.
 *
 * @example titleOf(['Engine oil and filter', 'Primary chaincase', 'Gearbox']) // 'Engine oil and filter, primary chaincase and gearbox'
 */
export function titleOf(titles: readonly string[]): string {
  const [first = 'Service', ...others] = titles;
  const rest = others.map((title) => title.charAt(0).toLowerCase() + title.slice(1));
  const last = rest.pop();
  return last === undefined ? first : `${[first, ...rest].join(', ')} and ${last}`;
}

function moment(date: string, time: string | undefined, zone: string): LocalMoment {
  return { date, ...(time === undefined ? {} : { time }), zone };
}
function decimal(text: string): string {
  const number = parseNumber(text);
  if (!number.ok) throw new RangeError(number.error);
  return number.amount;
}
function amountFrom({ amount, unit }: WorksheetAmount): Amount {
  if (amount === undefined || unit === undefined) throw new RangeError('An amount needs a figure and a unit.');
  return { amount: decimal(amount), unit };
}
/** Leaves out the members without a value. */
function stated<T extends object>(members: T): { [K in keyof T]?: Exclude<T[K], undefined> } {
  return Object.fromEntries(Object.entries(members).filter(([, value]) => value !== undefined)) as {
    [K in keyof T]?: Exclude<T[K], undefined>;
  };
}

function odometerFrom({ value, unit, instrument, unknownWhy }: Worksheet['odometer']): Partial<ServiceBody> {
  if (value !== undefined && unit !== undefined) return { odometer: { value: decimal(value), unit, instrument } };
  if (unknownWhy === undefined) throw new RangeError('A service needs an odometer reading, or why it is not known.');
  return { odometerUnknown: { why: unknownWhy } };
}

type DrawResolver = (draw: WorksheetDraw) => Draw;
// Several draws of one worksheet may take from one lot: each sees what the one before it left.
function drawResolver(lots: readonly Lot[]): DrawResolver {
  const balances = new Map(lots.map((lot) => [lot.key, lot.balance]));
  return (draw) => {
    const lot = lots.find(({ key }) => key === draw.lot);
    const balanceBefore = balances.get(draw.lot ?? '');
    if (lot === undefined || balanceBefore === undefined) throw new RangeError('A draw names no lot of the shelf.');
    const amount = amountFrom(draw);
    const negated = { amount: new Decimal(amount.amount).negated().toFixed(), unit: amount.unit };
    const after = sumAmounts([balanceBefore, negated], lot.unit);
    if (new Decimal(after.amount).lt(0)) throw new RangeError('A draw takes more than the lot has left.');
    balances.set(lot.key, after);
    return {
      purchase: { log: lot.log, seq: lot.seq, leafHash: lot.leafHash },
      line: lot.line,
      product: lot.product,
      ...stated({ grade: lot.grade }),
      boughtOn: lot.boughtOn.date,
      ...amount,
      balanceBefore,
      balanceAfter: after,
    };
  };
}

/** What of an amount used is in no draw; absent when all is. */
function uncoveredOf(used: Amount, draws: readonly Draw[]): { uncovered?: Amount } {
  const rest = balanceAfter(used, draws);
  return new Decimal(rest.amount).gt(0) ? { uncovered: rest } : {};
}

interface TaskContext {
  terms: TermsBody;
  draw: DrawResolver;
  recorded: ServiceBody['recorded'];
}

function taskFrom(task: WorksheetTask, { terms, draw, recorded }: TaskContext): Task {
  const procedure = procedureFor(task.key);
  const known = procedure.scheduleItems.filter((item) => terms.schedule.some((line) => line.item === item));
  const scheduleItem = task.scheduleItem ?? known[0];
  // A task put down to another item than its procedure's did only that item.
  const further =
    scheduleItem !== undefined && known.includes(scheduleItem) ? known.filter((item) => item !== scheduleItem) : [];
  const line = terms.schedule.find(({ item }) => item === scheduleItem);
  return {
    key: task.key,
    title: task.title ?? procedure.title,
    ...stated({ scheduleItem }),
    ...(further.length === 0 ? {} : { scheduleItems: further }),
    action: task.action ?? line?.action ?? (procedure.key === 'free' ? 'other' : procedure.action),
    steps: stepsFrom(task, recorded),
    inspections: task.inspections.map(({ subject = '', grade, note }) => ({ subject, ...stated({ grade, note }) })),
    fills: task.fills.map((fill) => fillFrom(fill, terms, draw)),
    torques: task.torques.map((torque) => {
      const { fastener = '', toolName, toolCalibratedOn } = torque;
      const specified = terms.fasteners.find((one) => one.fastener === fastener);
      return {
        fastener,
        fastenerTitle: specified?.title ?? fastener,
        ...amountFrom(torque),
        ...stated({ specification: specified?.bands }),
        ...(toolName === undefined ? {} : { tool: { name: toolName, ...stated({ calibratedOn: toolCalibratedOn }) } }),
      };
    }),
    parts: task.parts.map((part) => partFrom(part, draw)),
    levelChecks: task.levelChecks.map(({ point = '', position, temperature, reading = '' }) => ({
      point,
      pointTitle: terms.fluidPoints.find((one) => one.point === point)?.title ?? point,
      ...stated({ position, temperature }),
      reading,
    })),
  };
}

// Hold points left unticked are sealed too, as not done at a stated time. A service from paper knows no ticks.
function stepsFrom(task: WorksheetTask, recorded: ServiceBody['recorded']): Task['steps'] {
  const { holdPoints } = procedureFor(task.key);
  const all = holdPoints.map(({ key, title }) => ({ key, title, ...stated({ doneAt: task.steps[key] }) }));
  const others = Object.entries(task.steps).filter(([key]) => !holdPoints.some((point) => point.key === key));
  const steps = [...all, ...others.map(([key, doneAt]) => ({ key, title: key, doneAt }))];
  return recorded === 'from-paper' ? steps.filter(({ doneAt }) => doneAt !== undefined) : steps;
}

function fillFrom(fill: WorksheetFill, terms: TermsBody, draw: DrawResolver): Fill {
  const { point = '', fillKind = 'wet' } = fill;
  const specified = terms.fluidPoints.find((one) => one.point === point);
  const amounts = fill.amounts.map((item) => ({ ...amountFrom(item), step: item.step }));
  const draws = fill.draws.map(draw);
  return {
    point,
    pointTitle: specified?.title ?? point,
    fillKind,
    ...stated({ product: fill.product ?? draws[0]?.product, grade: fill.grade ?? draws[0]?.grade }),
    amounts,
    ...stated({ specification: fillKind === 'wet' ? specified?.wetFill : specified?.dryFill }),
    draws,
    ...uncoveredOf(sumAmounts(amounts), draws),
  };
}

function partFrom(part: WorksheetPart, draw: DrawResolver): PartUse {
  const quantity = decimal(part.quantity ?? '1');
  const draws = part.draws.map(draw);
  return {
    name: part.name ?? '',
    ...stated({ partNumber: part.partNumber }),
    quantity,
    draws,
    ...uncoveredOf({ amount: quantity, unit: '{piece}' }, draws),
  };
}
