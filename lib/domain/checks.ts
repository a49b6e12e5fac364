import type { Attachment, Check, Fill, PartUse, ServiceBody, TermsBody } from '@/lib/evidence/format';
import { adherenceOf, type AdherenceInterval } from './adherence';
import { delayInDays, describeDelay, formatLocalDate } from './instants';
import { readingProblem } from './odometer';
import type { DoneService, MachineHistory } from './schedule-limits';
import { checkTorque } from './torque';
import { convert, formatAmount, formatDistance, sumAmounts, units } from './units';

/** The questions a sceptical reader asks of a service, in the order they are shown. The list is closed. */
export const checkList = [
  {
    key: 'receipts',
    title: 'Receipt for every fluid and part',
    meaning: 'What was used can be shown to have been bought.',
  },
  { key: 'bought-before-use', title: 'Bought before used', meaning: 'No receipt is younger than the work.' },
  {
    key: 'grade-and-part-number',
    title: 'Grade and part number as specified',
    meaning: 'What was used is what the spec sheet names.',
  },
  {
    key: 'quantity',
    title: 'Quantity within specification',
    meaning: 'As much went in as the spec sheet says it takes.',
  },
  {
    key: 'torque',
    title: 'Torque within its band',
    meaning: 'Each torque lies between the spec sheet’s least and most.',
  },
  { key: 'odometer-photographed', title: 'Odometer photographed', meaning: 'A picture shows the reading.' },
  { key: 'odometer-plausible', title: 'Odometer plausible', meaning: 'The reading fits those before and after it.' },
  { key: 'logged-soon', title: 'Logged within 7 days', meaning: 'The entry was sealed while the work was fresh.' },
  { key: 'within-interval', title: 'Within the interval', meaning: 'The schedule’s distance and time were kept.' },
] as const;
export type CheckKey = (typeof checkList)[number]['key'];

export interface ReaderCheck extends Check {
  key: CheckKey;
  title: string;
}

const loggedSoonDays = 7;
/** A fill this far from a printed capacity still counts as filled to it. Common practice, no source. */
export const fillTolerancePercent = 5;

export interface CheckSources {
  /** The service; its own `checks` are not looked at. */
  body: Omit<ServiceBody, 'checks'>;
  /** The terms it is judged by. */
  terms: TermsBody;
  attachments: readonly Pick<Attachment, 'role'>[];
  /** UTC instant of sealing, or of now on a review page. */
  sealedAt: string;
  /** Services before this one, and what else the record knew then. */
  done: readonly DoneService[];
  history: Omit<MachineHistory, 'today'>;
}
type Verdict = Pick<Check, 'result' | 'detail'>;
const met = (detail: string): Verdict => ({ result: 'met', detail });
const notApplicable = (detail: string): Verdict => ({ result: 'not-applicable', detail });
const gap = (details: readonly string[]): Verdict => ({ result: 'gap', detail: details.join('. ') });

/**
 * The reader's checks of a service, each answered or named as a gap. Only what can be known at sealing is judged: time
 * stamps, countersignatures and "bought enough" are computed when the record is read.
 *
 * @example serviceChecks(sources).filter(({ result }) => result === 'gap').map(({ detail }) => detail) // ['No receipt for the Tarn front brake pads']
 */
export function serviceChecks(sources: CheckSources): ReaderCheck[] {
  const verdicts: Record<CheckKey, Verdict> = {
    receipts: receipts(sources),
    'bought-before-use': boughtBeforeUse(sources),
    'grade-and-part-number': gradeAndPartNumber(sources),
    quantity: quantity(sources),
    torque: torque(sources),
    'odometer-photographed': odometerPhotographed(sources),
    'odometer-plausible': odometerPlausible(sources),
    'logged-soon': loggedSoon(sources),
    'within-interval': withinInterval(sources),
  };
  return checkList.map(({ key, title }) => ({ key, title, ...verdicts[key] }));
}

/**
 * The checks in the form they are sealed in: without titles, which the closed list gives.
 *
 * @example frozenChecks(serviceChecks(sources))[0] // { key: 'receipts', result: 'met', detail: … }
 */
export function frozenChecks(checks: readonly ReaderCheck[]): Check[] {
  return checks.map(({ key, result, detail }) => ({ key, result, detail }));
}

/**
 * The title of a sealed check; a key of a later version is shown as it is.
 *
 * @example checkTitle('logged-soon') // 'Logged within 7 days'
 */
export function checkTitle(key: string): string {
  return checkList.find((check) => check.key === key)?.title ?? key;
}

const fillsOf = ({ body }: CheckSources): Fill[] => body.tasks.flatMap(({ fills }) => fills);
const partsOf = ({ body }: CheckSources): PartUse[] => body.tasks.flatMap(({ parts }) => parts);
const lowered = (text: string): string => text.charAt(0).toLowerCase() + text.slice(1);

function receipts(sources: CheckSources): Verdict {
  const fills = fillsOf(sources);
  const parts = partsOf(sources);
  if (fills.length + parts.length === 0) return notApplicable('No fluid or part is recorded');
  const { body, attachments } = sources;
  const isByTrade = body.performedBy.some(({ capacity }) => capacity === 'shop' || capacity === 'dealer');
  const hasWorkOrder = attachments.some(({ role }) => role === 'work-order');
  // Fluids a workshop supplied are on its own paper.
  if (isByTrade && hasWorkOrder) return met('Covered by the work order');
  const uses = [
    ...fills.map(({ pointTitle, draws, uncovered }) => ({ name: `${lowered(pointTitle)} fill`, draws, uncovered })),
    ...parts.map(({ name, draws, uncovered }) => ({ name: partInSentence(sources, name), draws, uncovered })),
  ];
  const missing = uses.flatMap(({ name, draws, uncovered }) => {
    if (draws.length === 0) return [`No receipt for the ${name}`];
    return uncovered === undefined ? [] : [`No receipt for ${formatAmount(uncovered)} of the ${name}`];
  });
  return missing.length === 0 ? met('Every fluid and part is drawn from a receipt') : gap(missing);
}

// A title of the spec sheet is a plain noun; anything else may be a product's name, which keeps its capitals.
const partInSentence = ({ terms }: CheckSources, name: string): string =>
  terms.parts.some(({ title }) => sameText(title, name)) ? lowered(name) : name;

function boughtBeforeUse(sources: CheckSources): Verdict {
  const draws = [...fillsOf(sources), ...partsOf(sources)].flatMap((use) => use.draws);
  if (draws.length === 0) return notApplicable('Nothing is drawn from a receipt');
  const { date } = sources.body.finishedAt;
  const later = draws.filter(({ boughtOn }) => boughtOn > date);
  if (later.length > 0) {
    return gap(
      later.map(({ product, boughtOn }) => `${product} was bought on ${formatLocalDate(boughtOn)}, after the work`),
    );
  }
  const latest =
    draws
      .map(({ boughtOn }) => boughtOn)
      .sort()
      .at(-1) ?? date;
  return met(`The latest purchase is of ${formatLocalDate(latest)}`);
}

const sameText = (a: string, b: string): boolean => plainText(a) === plainText(b);
const plainText = (text: string): string =>
  text
    .normalize('NFKC')
    .toLowerCase()
    .replace(/[\s\-–_.]/g, '')
    .replace(/^sae/, '');

function gradeAndPartNumber(sources: CheckSources): Verdict {
  const gaps: string[] = [];
  const kept: string[] = [];
  const unnamed: string[] = [];
  for (const { point, pointTitle, grade } of fillsOf(sources)) {
    const specified = sources.terms.fluidPoints.find((one) => one.point === point)?.grade;
    if (specified === undefined) unnamed.push(`the ${lowered(pointTitle)} fill`);
    else if (grade === undefined)
      gaps.push(`No grade recorded for the ${lowered(pointTitle)}; ${specified} is specified`);
    else if (!sameText(grade, specified)) gaps.push(`${pointTitle}: ${grade} used, ${specified} specified`);
    else kept.push(`${pointTitle}: ${grade}, as specified`);
  }
  for (const { name, partNumber } of partsOf(sources)) {
    const specified =
      sources.terms.parts.find(({ part, title }) => sameText(title, name) || part === name)?.partNumbers ?? [];
    if (specified.length === 0) unnamed.push(`the ${partInSentence(sources, name)}`);
    else if (partNumber === undefined)
      gaps.push(
        `No part number recorded for the ${partInSentence(sources, name)}; ${specified.join(' or ')} is specified`,
      );
    else if (!specified.some((one) => sameText(one, partNumber))) {
      gaps.push(`${name}: part number ${partNumber} used, ${specified.join(' or ')} specified`);
    } else kept.push(`${name}: part number ${partNumber}, as specified`);
  }
  if (gaps.length > 0) return gap(gaps);
  if (kept.length === 0) return notApplicable('The spec sheet names no grade or part number for this work');
  // What nothing is specified for was not compared, and a reader is told so.
  const others = [...new Set(unnamed)].join(', ');
  return met([...kept, ...(others === '' ? [] : [`The spec sheet names none for ${others}`])].join('. '));
}

function quantity(sources: CheckSources): Verdict {
  const gaps: string[] = [];
  const kept: string[] = [];
  for (const { pointTitle, amounts, specification = [] } of fillsOf(sources)) {
    const total = amounts.length === 0 ? undefined : sumAmounts(amounts);
    const comparable = specification.filter(
      ({ unit }) => total !== undefined && units[unit].dimension === units[total.unit].dimension,
    );
    const printed = comparable.find(({ unit }) => unit === amounts[0]?.unit) ?? comparable[0];
    if (total === undefined || printed === undefined) continue;
    const percent = convert(total.amount, total.unit, printed.unit).div(printed.amount).times(100);
    const words = `${pointTitle}: ${formatAmount(total)}, specified ${formatAmount(printed)}`;
    if (percent.minus(100).abs().gt(fillTolerancePercent)) gaps.push(words);
    else kept.push(words);
  }
  if (gaps.length > 0) return gap(gaps);
  return kept.length === 0 ? notApplicable('No capacity is specified for this work') : met(kept.join('. '));
}

function torque(sources: CheckSources): Verdict {
  const checked = sources.body.tasks
    .flatMap(({ torques }) => torques)
    .map((one) => ({ title: one.fastenerTitle, ...checkTorque(one, one.specification ?? []) }))
    .filter(({ result }) => result !== 'no-band');
  if (checked.length === 0) return notApplicable('No torque with a band is recorded');
  const outside = checked.filter(({ result }) => result !== 'within');
  const words = (list: typeof checked): string[] =>
    list.map(({ title, sentence }) => `${title}: ${sentence.replace(/\.$/, '')}`);
  return outside.length > 0 ? gap(words(outside)) : met(words(checked).join('. '));
}

function odometerPhotographed({ body, attachments }: CheckSources): Verdict {
  if (body.odometer === undefined)
    return gap([`No odometer reading: ${body.odometerUnknown?.why ?? 'no reason given'}`]);
  return attachments.some(({ role }) => role === 'odometer')
    ? met('A photo is attached')
    : gap(['No photo of the odometer']);
}

function odometerPlausible({ body, history }: CheckSources): Verdict {
  const { odometer, finishedAt } = body;
  if (odometer === undefined) return notApplicable('No odometer reading');
  const doubt = readingProblem({ ...odometer, on: finishedAt.date }, history.readings);
  return doubt === undefined
    ? met(`${formatDistance(odometer)} fits the other readings`)
    : gap([doubt.split('. ')[0] ?? doubt]);
}

function loggedSoon({ body, sealedAt }: CheckSources): Verdict {
  const words = describeDelay(body.finishedAt, sealedAt);
  if (body.recorded === 'from-paper') return gap([`Recorded later from paper, ${words}`]);
  return delayInDays(body.finishedAt, sealedAt) <= loggedSoonDays ? met(`Sealed ${words}`) : gap([`Sealed ${words}`]);
}

/**
 * The interval each schedule item of a service has just closed.
 *
 * @example closedIntervals(sources)[0]?.interval.result // 'in-time'
 */
export function closedIntervals({
  body,
  terms,
  done,
  history,
}: CheckSources): { title: string; interval: AdherenceInterval }[] {
  const { date } = body.finishedAt;
  const readings =
    body.odometer === undefined ? history.readings : [...history.readings, { ...body.odometer, on: date }];
  const items = new Set(
    body.tasks.flatMap(({ scheduleItem, scheduleItems = [] }) => [
      ...(scheduleItem ? [scheduleItem] : []),
      ...scheduleItems,
    ]),
  );
  return terms.schedule.flatMap((item) => {
    if (!items.has(item.item)) return [];
    const { odometer, engineHours } = body;
    const now: DoneService = {
      item: item.item,
      on: date,
      ...(odometer === undefined ? {} : { odometer }),
      ...(engineHours === undefined ? {} : { hours: engineHours }),
      // Of services of one day at one reading this one is the last.
      seq: Number.MAX_SAFE_INTEGER,
    };
    const before = done.filter(({ on }) => on <= date);
    const interval = adherenceOf(item, [...before, now], { ...history, readings, today: date }).findLast(
      ({ to }) => to.what === 'done',
    );
    return interval === undefined ? [] : [{ title: item.title, interval }];
  });
}

function withinInterval(sources: CheckSources): Verdict {
  const closed = closedIntervals(sources).filter(({ interval }) => interval.result !== 'no-limit');
  if (closed.length === 0) return notApplicable('No schedule item with a limit was done');
  const words = (list: typeof closed): string[] => list.map(({ title, interval }) => `${title}: ${interval.sentence}`);
  const late = closed.filter(({ interval }) => interval.result === 'late');
  if (late.length > 0) return gap(words(late));
  const unknown = closed.filter(({ interval }) => interval.result === 'not-known');
  if (unknown.length > 0) return gap(words(unknown));
  const judged = closed.filter(({ interval }) => interval.result !== 'before-record');
  return judged.length === 0 ? notApplicable(words(closed).join('. ')) : met(words(judged).join('. '));
}
