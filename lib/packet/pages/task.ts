import 'server-only';
import { formatLocalDate } from '@/lib/domain/instants';
import { formatAmount, readableAmount, sumAmounts, units } from '@/lib/domain/units';
import type { Draw, Fill, Inspection, LevelCheck, PartUse, Task, Torque } from '@/lib/evidence/format';
import type { RecordView } from '@/lib/services/record-view';
import { purchasesOf, receiptAnchor, receiptName } from '../content';
import { drawBoxes, type Cell } from '../sheet/boxes';
import { types, type Sheet } from '../sheet/sheet';
import { drawTable } from '../sheet/table';
import { amountsWords, gradeWords, metricWords, productWords } from '../words';

/** One task of a service, or the same members of an addendum. */
export function drawTask(sheet: Sheet, task: Partial<Task> & { title: string }, record: RecordView): void {
  const cells = [
    ...(task.fills ?? []).map(fillCell),
    ...(task.torques ?? []).map(torqueCell),
    ...(task.levelChecks ?? []).map(levelCell),
    ...(task.inspections ?? []).map(inspectionCell),
    ...(task.parts ?? []).map(partCell),
  ];
  const steps = (task.steps ?? []).map(({ title }) => title);
  sheet.gap(10);
  sheet.room(60);
  sheet.paragraph(task.title, types.h3, { tag: 'H3' });
  if (cells.length > 0) {
    sheet.gap(2);
    drawBoxes(sheet, 4, cells);
  }
  if (steps.length > 0) {
    sheet.gap(3);
    sheet.paragraph(`Hold points ticked: ${steps.join('; ')}.`, types.small);
  }
  drawDraws(sheet, task, record);
}

function fillCell(fill: Fill): Cell {
  const { pointTitle, fillKind, product, grade, amounts, specification, uncovered } = fill;
  const first = amounts[0];
  const isOneUnit = amounts.every(({ unit }) => unit === first?.unit);
  const value =
    first !== undefined && isOneUnit
      ? `${amounts.map(({ amount }) => amount).join(' + ')} ${units[first.unit].label}`
      : amounts.map(formatAmount).join(' + ');
  const total = amounts.length === 0 ? undefined : sumAmounts(amounts);
  const metric = total === undefined ? undefined : metricWords(total);
  const specified = specification === undefined ? undefined : `specified ${amountsWords(specification)}`;
  const missing = uncovered === undefined ? undefined : `${formatAmount(uncovered)} without a receipt`;
  return {
    label: [`${pointTitle}, ${fillKind} fill`, product === undefined ? grade : productWords(product, grade)]
      .filter(Boolean)
      .join(', '),
    value: value === '' ? 'not stated' : value,
    kind: 'number',
    span: 2,
    note: [metric, specified, missing].filter(Boolean).join('; ') || undefined,
    isGap: uncovered !== undefined,
  };
}

function torqueCell({ fastenerTitle, amount, unit, specification, tool }: Torque): Cell {
  const bands = (specification ?? []).map((band) => {
    const range = band.min === band.max ? band.min : `${band.min} to ${band.max}`;
    return `${range} ${units[band.unit].label}`;
  });
  const calibrated =
    tool?.calibratedOn === undefined ? '' : `, calibrated ${formatLocalDate(tool.calibratedOn.slice(0, 10))}`;
  return {
    label: [fastenerTitle, ...bands].join(', '),
    value: formatAmount({ amount, unit }),
    kind: 'number',
    note: [metricWords({ amount, unit }), tool === undefined ? undefined : `${tool.name}${calibrated}`]
      .filter(Boolean)
      .join('; '),
  };
}

function levelCell({ pointTitle, position, temperature, reading }: LevelCheck): Cell {
  return { label: ['Level', pointTitle, temperature, position].filter(Boolean).join(', '), value: reading };
}

function inspectionCell({ subject, grade, note }: Inspection): Cell {
  const value = grade === undefined ? (note ?? 'looked at') : gradeWords(grade);
  return { label: subject, value, span: 2, note: grade === undefined ? undefined : note };
}

function partCell({ name, partNumber, quantity, uncovered }: PartUse): Cell {
  const missing = uncovered === undefined ? undefined : `${formatAmount(uncovered)} without a receipt`;
  return {
    label: partNumber === undefined ? 'Part' : `Part ${partNumber}`,
    value: `${name}${quantity === '1' ? '' : `, ${quantity} pieces`}`,
    span: 2,
    note: missing,
    isGap: uncovered !== undefined,
  };
}

function drawDraws(sheet: Sheet, task: Partial<Task>, record: RecordView): void {
  const draws = [...(task.fills ?? []), ...(task.parts ?? [])].flatMap((use) => use.draws);
  if (draws.length === 0) return;
  sheet.gap(4);
  drawTable(
    sheet,
    [
      { title: 'Drawn from lot', share: 4 },
      { title: 'Bought', share: 1.7 },
      { title: 'Drawn', share: 1.7, type: types.strong },
      { title: 'Left after, all machines', share: 2 },
      { title: 'Receipt', share: 1.6 },
    ],
    draws.map((draw) => [
      `${receiptName(draw.purchase)} line ${draw.line}: ${productWords(draw.product, draw.grade)}`,
      formatLocalDate(draw.boughtOn),
      formatAmount({ amount: draw.amount, unit: draw.unit }),
      readableAmount(draw.balanceAfter),
      receiptPage(sheet, draw, record),
    ]),
  );
}

function receiptPage(sheet: Sheet, { purchase }: Draw, record: RecordView) {
  const known = purchasesOf(record).find(({ log, seq }) => log === purchase.log && seq === purchase.seq);
  if (known === undefined) return { text: 'not opened', isGap: true };
  return { late: () => `page ${sheet.pageOf(receiptAnchor(known))}` };
}
