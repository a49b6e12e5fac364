import 'server-only';
import { procedureFor } from '@/lib/domain/procedures';
import type { StoryPurchase, StoryTask, StoryWork } from './story-types';
import { shops } from './story-types';

export type FieldValues = [field: string, value: string][];

/** A part or fluid is drawn by the id of its place in the worksheet; which lots it comes from is known at its turn. */
export interface Wanted {
  path: string;
  product: string;
  amount: string;
  unit: string;
}

export function fieldsOfPurchase(purchase: StoryPurchase, zone: string): FieldValues {
  const { name, address } = shops[purchase.shop];
  return [
    ['boughtOn/date', purchase.on],
    ['boughtOn/time', purchase.time],
    ['zone', zone],
    ['supplier/name', name],
    ['supplier/address', address],
    ['currency', 'USD'],
    ['total', totalOf(purchase)],
    ...purchase.lines.flatMap((line, i): FieldValues => {
      const path = `lines/l${i + 1}`;
      const isFluid = line.size !== undefined;
      return present([
        [`${path}/position`, String(i + 1)],
        [`${path}/kind`, isFluid ? 'fluid' : 'part'],
        [`${path}/product`, line.product],
        [`${path}/grade`, line.grade],
        [`${path}/standard`, line.standard],
        [`${path}/partNumber`, line.partNumber],
        [`${path}/batch`, line.batch],
        [`${path}/containers`, line.containers],
        [`${path}/containerSize/amount`, line.size?.[0]],
        [`${path}/containerSize/unit`, line.size?.[1]],
        [`${path}/quantity`, line.quantity],
        [`${path}/price`, line.price],
      ]);
    }),
  ];
}

/** Cents, added as integers. */
export function totalOf(purchase: StoryPurchase): string {
  const cents = purchase.lines.reduce((sum, { price }) => sum + Number(price.replace('.', '')), 0);
  return `${Math.floor(cents / 100)}.${String(cents % 100).padStart(2, '0')}`;
}

/** The fields of a worksheet, without its draws; `stepAt` gives the instant of the n-th of m hold points. */
export function fieldsOfWork(
  work: StoryWork,
  options: { zone: string; owner: string; stepAt: (n: number, of: number) => string },
): { fields: FieldValues; wanted: Wanted[] } {
  const wanted: Wanted[] = [];
  const steps = work.tasks.reduce((sum, { key }) => sum + procedureFor(key).holdPoints.length, 0);
  let step = 0;
  const fields: FieldValues = [
    ['startedAt/date', work.on],
    ['startedAt/time', work.from],
    ['zone', options.zone],
    ...((work.odometerUnknown === undefined
      ? [
          ['odometer/value', work.odometer],
          ['odometer/unit', '[mi_i]'],
        ]
      : [['odometer/unknownWhy', work.odometerUnknown]]) as FieldValues),
    ...present([
      ['title', work.title],
      ['notes', work.notes],
      ['workOrder', work.workOrder],
    ]),
    ...(work.stoppedAfter === undefined
      ? ([
          ['finishedAt/date', work.on],
          ['finishedAt/time', work.to],
        ] as FieldValues)
      : []),
    ...(work.by === undefined
      ? []
      : ([
          ['performedBy/halyard/capacity', work.by],
          ['performedBy/halyard/name', 'Halyard Cycle Works'],
        ] as FieldValues)),
  ];
  work.tasks.forEach((task, i) => {
    const path = `tasks/t${i + 1}`;
    fields.push([`${path}/position`, String(i + 1)], ...fieldsOfTask(task, path, wanted));
    for (const { key } of procedureFor(task.key).holdPoints) {
      step += 1;
      fields.push([`${path}/steps/${key}`, options.stepAt(step, steps)]);
      if (key === work.stoppedAfter) break;
    }
  });
  return { fields, wanted };
}

function fieldsOfTask(task: StoryTask, path: string, wanted: Wanted[]): FieldValues {
  const fields: FieldValues = present([
    [`${path}/key`, task.key],
    [`${path}/title`, task.title],
    [`${path}/scheduleItem`, task.item],
    [`${path}/action`, task.action],
  ]);
  const { fill, level } = task;
  if (fill !== undefined) {
    fields.push([`${path}/fills/f1/point`, fill.point], [`${path}/fills/f1/fillKind`, fill.kind]);
    fields.push([`${path}/fills/f1/product`, fill.product]);
    if (fill.grade !== undefined) fields.push([`${path}/fills/f1/grade`, fill.grade]);
    fill.amounts.forEach(([amount, unit, amountStep], i) => {
      const at = `${path}/fills/f1/amounts/a${i + 1}`;
      fields.push(
        [`${at}/position`, String(i + 1)],
        [`${at}/amount`, amount],
        [`${at}/unit`, unit],
        [`${at}/step`, amountStep],
      );
      wanted.push({ path: `${path}/fills/f1`, product: fill.product, amount, unit });
    });
  }
  task.torques?.forEach(([fastener, amount, unit], i) => {
    const at = `${path}/torques/q${i + 1}`;
    fields.push([`${at}/fastener`, fastener], [`${at}/amount`, amount], [`${at}/unit`, unit]);
    // A wrench is used within its own range.
    const tool = unit.startsWith('[in_i]') ? 'click wrench, 40 to 200 lbf·in' : 'click wrench, 10 to 60 lbf·ft';
    fields.push([`${at}/toolName`, tool], [`${at}/toolCalibratedOn`, '2023-02-14']);
  });
  task.inspections?.forEach(([subject, grade, note], i) => {
    const at = `${path}/inspections/i${i + 1}`;
    fields.push(...present([[`${at}/subject`, subject], [`${at}/grade`, grade], [`${at}/note`, note]])); // prettier-ignore
  });
  task.parts?.forEach(([name, partNumber, quantity], i) => {
    const at = `${path}/parts/p${i + 1}`;
    fields.push([`${at}/name`, name], [`${at}/partNumber`, partNumber], [`${at}/quantity`, quantity]);
    wanted.push({ path: at, product: name, amount: quantity, unit: '{piece}' });
  });
  if (level !== undefined) {
    const at = `${path}/levelChecks/c1`;
    fields.push([`${at}/point`, level[0]], [`${at}/position`, level[1]]);
    fields.push([`${at}/temperature`, level[2]], [`${at}/reading`, level[3]]);
  }
  return fields;
}

function present(pairs: [string, string | null | undefined][]): FieldValues {
  return pairs.filter((pair): pair is [string, string] => pair[1] !== undefined && pair[1] !== null);
}
