import type { Amount, FluidPoint, TermsBody } from '@/lib/evidence/format';
import { formatLocalDate, instantOf, isLocalDate, isLocalTime, isZone, localDateOf } from './instants';
import { readingProblem, type OdometerReading } from './odometer';
import { drawProblem, type Lot } from './shelf';
import { compareAmounts, Decimal, formatAmount, parseNumber, sumAmounts, units, type Dimension } from './units';
import type { Worksheet, WorksheetAmount, WorksheetDraw, WorksheetFill, WorksheetTask } from './worksheet';

export interface ProblemContext {
  /** UTC instant. */
  now: string;
  terms?: TermsBody;
  /** Odometer history without this worksheet. */
  readings?: readonly OdometerReading[];
  /** Lots with their balances, without this worksheet's own draws. Absent: draws are not judged. */
  lots?: readonly Lot[];
}
type Problems = Record<string, string>;

/** A fill this many times what the fluid point holds is a wrong unit, not a large fill. */
const wrongUnitFactor = 3;

/**
 * What keeps a worksheet from being sealed, by field. Each sentence says what is wrong and what to do. Gaps (no
 * receipt, no photo, out of band) are no problems: they are sealed as they are.
 *
 * @example fieldProblems(worksheetFrom({}), { now })['finishedAt/date'] // 'Enter the day the work was finished.'
 */
export function fieldProblems(worksheet: Worksheet, context: ProblemContext): Problems {
  const problems: Problems = { ...timeProblems(worksheet, context.now), ...odometerProblems(worksheet, context) };
  if (worksheet.tasks.length === 0) problems.tasks = 'Add at least one task: an entry says what was done.';
  if (worksheet.performedBy.length === 0) problems.performedBy = 'Say who did the work.';
  const judge = drawJudge(worksheet, context, problems);
  for (const task of worksheet.tasks) taskProblems(task, context, problems, judge);
  return problems;
}

function timeProblems({ startedAt, finishedAt, zone }: Worksheet, now: string): Problems {
  const problems: Problems = {};
  if (zone === undefined) problems.zone = 'Choose the time zone the work was done in.';
  else if (!isZone(zone)) problems.zone = `“${zone}” is not a time zone known here. Choose one from the list.`;
  if (finishedAt.date === undefined) problems['finishedAt/date'] = 'Enter the day the work was finished.';
  for (const [name, moment] of [
    ['startedAt', startedAt],
    ['finishedAt', finishedAt],
  ] as const) {
    if (moment.date !== undefined && !isLocalDate(moment.date)) {
      problems[`${name}/date`] = `${moment.date} is not a day of the calendar. Enter it like 2026-04-18.`;
    }
    if (moment.time !== undefined && !isLocalTime(moment.time)) {
      problems[`${name}/time`] = `${moment.time} is not a time of day. Enter it like 15:53.`;
    }
    if (moment.date === undefined && moment.time !== undefined && name === 'startedAt') {
      problems['startedAt/date'] = 'Enter the day the work began, or clear its time.';
    }
  }
  if (Object.keys(problems).length > 0 || zone === undefined) return problems;
  for (const [name, { date, time }] of [
    ['startedAt', startedAt],
    ['finishedAt', finishedAt],
  ] as const) {
    if (date === undefined) continue;
    const isFutureDay = date > localDateOf(now, zone);
    const isFutureTime =
      !isFutureDay && time !== undefined && Date.parse(instantOf({ date, time, zone })) > Date.parse(now);
    if (isFutureDay) problems[`${name}/date`] = `${formatLocalDate(date)} is in the future. Enter the day it was done.`;
    if (isFutureTime)
      problems[`${name}/time`] = `${time} on ${formatLocalDate(date)} is in the future. Correct the time.`;
  }
  const { date: from, time: fromTime = '00:00' } = startedAt;
  const { date: until, time: untilTime = '23:59' } = finishedAt;
  if (from !== undefined && until !== undefined && `${from} ${fromTime}` > `${until} ${untilTime}`) {
    problems[from > until ? 'startedAt/date' : 'startedAt/time'] =
      'The work began after it was finished. Correct one of the two.';
  }
  return problems;
}

function odometerProblems(
  { odometer, engineHours, startedAt, finishedAt }: Worksheet,
  { readings = [] }: ProblemContext,
): Problems {
  const problems: Problems = {};
  const day = finishedAt.date ?? startedAt.date;
  if (engineHours !== undefined) {
    const hours = parseNumber(engineHours);
    if (!hours.ok) problems.engineHours = hours.error;
    else if (hours.amount.startsWith('-'))
      problems.engineHours = 'Engine hours cannot be below zero. Leave out the minus sign.';
  }
  if (odometer.value === undefined) {
    if (odometer.unknownWhy === undefined) {
      problems['odometer/value'] = 'Enter the odometer reading, or say why it is not known.';
    }
    return problems;
  }
  const value = parseNumber(odometer.value);
  if (!value.ok) return { ...problems, 'odometer/value': value.error };
  if (value.amount.startsWith('-'))
    problems['odometer/value'] = 'An odometer cannot be below zero. Leave out the minus sign.';
  else if (odometer.unit === undefined) problems['odometer/unit'] = 'Choose the odometer’s unit: km or mi.';
  else if (units[odometer.unit].dimension !== 'distance')
    problems['odometer/unit'] = 'An odometer counts km or mi. Choose one of them.';
  // Doubted from the day the work begins, while the machine is still there to be looked at again.
  else if (day !== undefined && isLocalDate(day)) {
    const { unit, instrument } = odometer;
    const doubt = readingProblem({ on: day, value: value.amount, unit, instrument }, readings);
    if (doubt !== undefined) problems['odometer/value'] = doubt;
  }
  return problems;
}

/** Notes what is wrong with one amount and gives it back when it is usable. */
function amountProblems(
  item: WorksheetAmount,
  path: string,
  what: string,
  dimensions: readonly Dimension[],
  problems: Problems,
): Amount | undefined {
  if (item.amount === undefined) {
    problems[`${path}/amount`] = `Enter ${what}, or remove this line.`;
    return undefined;
  }
  const number = parseNumber(item.amount);
  if (!number.ok) problems[`${path}/amount`] = number.error;
  else if (new Decimal(number.amount).lte(0))
    problems[`${path}/amount`] = `Enter ${what} as more than zero, or remove this line.`;
  if (item.unit === undefined) problems[`${path}/unit`] = `Choose the unit of ${item.amount}.`;
  else if (!dimensions.includes(units[item.unit].dimension)) {
    problems[`${path}/unit`] = `${units[item.unit].label} does not measure ${what}. Choose another unit.`;
  } else if (number.ok && problems[`${path}/amount`] === undefined) return { amount: number.amount, unit: item.unit };
  return undefined;
}

function taskProblems(task: WorksheetTask, context: ProblemContext, problems: Problems, judge: DrawJudge): void {
  const path = `tasks/${task.id}`;
  if (task.key === 'free' && task.title === undefined) problems[`${path}/title`] = 'Name the task, or remove it.';
  for (const fill of task.fills) fillProblems(fill, `${path}/fills/${fill.id}`, context, problems, judge);
  for (const torque of task.torques) {
    const at = `${path}/torques/${torque.id}`;
    if (torque.fastener === undefined) problems[`${at}/fastener`] = 'Choose the fastener, or remove this line.';
    amountProblems(torque, at, 'the torque', ['torque', 'angle'], problems);
    const { toolCalibratedOn: day } = torque;
    if (day !== undefined && (!isLocalDate(day) || day > context.now.slice(0, 10))) {
      problems[`${at}/toolCalibratedOn`] =
        `${day} is not a past day. Enter the day the wrench was calibrated, like 2026-04-18.`;
    }
  }
  for (const { id, subject, grade, note } of task.inspections) {
    const at = `${path}/inspections/${id}`;
    if (subject === undefined) problems[`${at}/subject`] = 'Say what was looked at, or remove this line.';
    else if (grade === undefined && note === undefined)
      problems[`${at}/grade`] = 'Say what was found, or remove this line.';
  }
  for (const part of task.parts) {
    const at = `${path}/parts/${part.id}`;
    if (part.name === undefined) problems[`${at}/name`] = 'Name the part, or remove this line.';
    const quantity = parseNumber(part.quantity ?? '1');
    if (!quantity.ok) problems[`${at}/quantity`] = quantity.error;
    else if (new Decimal(quantity.amount).lte(0)) problems[`${at}/quantity`] = 'Enter how many, or remove this line.';
    const used = quantity.ok ? ({ amount: quantity.amount, unit: '{piece}' } as const) : undefined;
    judge(part.draws, at, ['count'], used, 'quantity');
  }
  for (const check of task.levelChecks) {
    const at = `${path}/levelChecks/${check.id}`;
    if (check.point === undefined) problems[`${at}/point`] = 'Say which level was checked, or remove this line.';
    if (check.reading === undefined)
      problems[`${at}/reading`] = 'Say what the level check showed, or remove this line.';
  }
}

function fillProblems(
  fill: WorksheetFill,
  path: string,
  context: ProblemContext,
  problems: Problems,
  judge: DrawJudge,
): void {
  if (fill.point === undefined) problems[`${path}/point`] = 'Choose what was filled, or remove this fill.';
  if (fill.amounts.length === 0) problems[`${path}/amounts`] = 'Enter how much went in, or remove this fill.';
  const amounts = fill.amounts.flatMap((item) => {
    const amount = amountProblems(
      item,
      `${path}/amounts/${item.id}`,
      'the amount filled',
      ['volume', 'mass'],
      problems,
    );
    return amount === undefined ? [] : [amount];
  });
  const isWhole = amounts.length === fill.amounts.length && amounts.length > 0;
  const isOneMeasure = new Set(amounts.map(({ unit }) => units[unit].dimension)).size === 1;
  if (isWhole && !isOneMeasure)
    problems[`${path}/amounts`] = 'Volumes and masses do not add up. Enter the fill in one of them.';
  const total = isWhole && isOneMeasure ? sumAmounts(amounts) : undefined;
  const point = context.terms?.fluidPoints.find(({ point: key }) => key === fill.point);
  const last = fill.amounts.at(-1);
  if (total !== undefined && point !== undefined && last !== undefined) {
    const doubt = wrongUnit(total, point);
    if (doubt !== undefined) problems[`${path}/amounts/${last.id}/unit`] = doubt;
  }
  judge(fill.draws, path, ['volume', 'mass'], total, 'amounts');
}

function wrongUnit(total: Amount, point: FluidPoint): string | undefined {
  const capacities = [...(point.wetFill ?? []), ...(point.dryFill ?? [])];
  const comparable = capacities.filter(({ unit }) => units[unit].dimension === units[total.unit].dimension);
  const limit = comparable.map(({ amount, unit }) => ({
    amount: new Decimal(amount).times(wrongUnitFactor).toFixed(),
    unit,
  }));
  const first = comparable[0];
  if (first === undefined || limit.some((most) => compareAmounts(total, most) <= 0)) return undefined;
  return `${formatAmount(total)} is far more than ${point.title} holds (${formatAmount(first)}). Is the unit right? Correct the amount or its unit.`;
}

type DrawJudge = (
  draws: readonly WorksheetDraw[],
  path: string,
  dimensions: readonly Dimension[],
  used: Amount | undefined,
  usedField: string,
) => void;

// Draws are judged over the whole worksheet: two tasks may take from the same lot.
function drawJudge(worksheet: Worksheet, { lots }: ProblemContext, problems: Problems): DrawJudge {
  const takenBefore = new Map<string, Amount[]>();
  const { date } = worksheet.finishedAt;
  const on = date !== undefined && isLocalDate(date) ? date : undefined;
  return (draws, path, dimensions, used, usedField) => {
    const drawn: Amount[] = [];
    for (const draw of draws) {
      const at = `${path}/draws/${draw.id}`;
      const amount = amountProblems(draw, at, 'the amount drawn', dimensions, problems);
      if (draw.lot === undefined) problems[`${at}/lot`] = 'Choose the lot, or remove this draw.';
      if (amount === undefined || draw.lot === undefined) continue;
      drawn.push(amount);
      if (lots === undefined) continue;
      const lot = lots.find(({ key }) => key === draw.lot);
      if (lot === undefined) {
        problems[`${at}/lot`] = 'This lot is not on your shelf, or was struck. Choose another, or remove this draw.';
        continue;
      }
      const taken = takenBefore.get(lot.key) ?? [];
      const isSameMeasure = units[amount.unit].dimension === units[lot.unit].dimension;
      const balance = isSameMeasure && taken.length > 0 ? sumLeft(lot, taken) : lot.balance;
      const doubt = drawProblem({ ...lot, balance }, amount, on);
      if (doubt !== undefined) problems[`${at}/amount`] = doubt;
      if (isSameMeasure) takenBefore.set(lot.key, [...taken, amount]);
    }
    if (used === undefined || drawn.length === 0) return;
    if (drawn.some(({ unit }) => units[unit].dimension !== units[used.unit].dimension)) {
      problems[`${path}/${usedField}`] =
        `The draws are not counted in ${units[used.unit].label}. Enter both in the same kind of unit.`;
      return;
    }
    const total = sumAmounts(drawn, used.unit);
    if (compareAmounts(total, used) > 0) {
      problems[`${path}/${usedField}`] =
        `${formatAmount(total)} is drawn from lots, but only ${formatAmount(used)} was used. Correct one of the two.`;
    }
  };
}

function sumLeft(lot: Lot, taken: readonly Amount[]): Amount {
  const minus = taken.map(({ amount, unit }) => ({ amount: new Decimal(amount).negated().toFixed(), unit }));
  return sumAmounts([lot.balance, ...minus], lot.unit);
}
