import { attachmentRoles, type AttachmentRole, type UnitCode } from '@/lib/evidence/format';
import { fieldTree, itemsOf, textAt, type FieldNode, type Fields } from './field-changes';
import { isUnitCode } from './units';

export { foldChanges, type FieldChange, type Fields } from './field-changes';
export { fieldProblems, type ProblemContext } from './worksheet-problems';

/** Figures are texts as typed: `4,25` stays `4,25` until it is sealed. `id` is the item's key in its collection. */
export interface WorksheetAmount {
  id: string;
  amount?: string;
  unit?: UnitCode;
}
export interface WorksheetDraw extends WorksheetAmount {
  /** `<shelf log>:<seq>:<line>`, as `lotKey` writes it. */
  lot?: string;
}
export interface WorksheetFill {
  id: string;
  point?: string;
  fillKind?: 'wet' | 'dry';
  product?: string;
  grade?: string;
  amounts: (WorksheetAmount & { step: 'first' | 'top-up' })[];
  draws: WorksheetDraw[];
}
export interface WorksheetTorque extends WorksheetAmount {
  fastener?: string;
  toolName?: string;
  toolCalibratedOn?: string;
}
export interface WorksheetInspection {
  id: string;
  subject?: string;
  grade?: string;
  note?: string;
}
export interface WorksheetPart {
  id: string;
  name?: string;
  partNumber?: string;
  quantity?: string;
  draws: WorksheetDraw[];
}
export interface WorksheetLevelCheck {
  id: string;
  point?: string;
  position?: string;
  temperature?: string;
  reading?: string;
}
export interface WorksheetTask {
  id: string;
  /** A procedure's key (`engine-oil`, `primary`, …) or `free`. */
  key: string;
  title?: string;
  action?: string;
  scheduleItem?: string;
  /** Hold points done: key to ISO instant. */
  steps: Record<string, string>;
  fills: WorksheetFill[];
  torques: WorksheetTorque[];
  inspections: WorksheetInspection[];
  parts: WorksheetPart[];
  levelChecks: WorksheetLevelCheck[];
}
export interface Worksheet {
  startedAt: { date?: string; time?: string };
  finishedAt: { date?: string; time?: string };
  zone?: string;
  recorded: 'at-the-time' | 'from-paper';
  odometer: { value?: string; unit?: UnitCode; instrument: number; unknownWhy?: string };
  engineHours?: string;
  title?: string;
  notes?: string;
  statement?: string;
  workOrder?: string;
  performedBy: { id: string; capacity: 'owner' | 'helper' | 'shop' | 'dealer' }[];
  tasks: WorksheetTask[];
  photos: { uploadId: string; role?: AttachmentRole; caption?: string }[];
}

/** Members without a value are left out, so that a draft reads like the body it becomes. */
function present<T extends Record<string, unknown>>(members: T): { [K in keyof T]?: Exclude<T[K], undefined> } {
  return Object.fromEntries(Object.entries(members).filter(([, value]) => value !== undefined)) as {
    [K in keyof T]?: Exclude<T[K], undefined>;
  };
}
function texts<K extends string>(node: FieldNode, names: readonly K[]): { [N in K]?: string } {
  return present(Object.fromEntries(names.map((name) => [name, textAt(node, name)]))) as { [N in K]?: string };
}
function oneOf<T extends string>(text: string | undefined, values: readonly T[]): T | undefined {
  return values.find((value) => value === text);
}
function unitAt(node: FieldNode, path = 'unit'): UnitCode | undefined {
  const text = textAt(node, path);
  return text !== undefined && isUnitCode(text) ? text : undefined;
}
function amountOf({ id, node }: { id: string; node: FieldNode }): WorksheetAmount {
  return { id, ...present({ amount: textAt(node, 'amount'), unit: unitAt(node) }) };
}
function drawsOf(node: FieldNode): WorksheetDraw[] {
  return itemsOf(node, 'draws').map((item) => ({ ...amountOf(item), ...texts(item.node, ['lot']) }));
}

function fillOf({ id, node }: { id: string; node: FieldNode }): WorksheetFill {
  return {
    id,
    ...texts(node, ['point', 'product', 'grade']),
    ...present({ fillKind: oneOf<'wet' | 'dry'>(textAt(node, 'fillKind'), ['wet', 'dry']) }),
    // The first fill reads first, whichever was written down before the other.
    amounts: itemsOf(node, 'amounts')
      .map((item) => ({
        ...amountOf(item),
        step: oneOf<'first' | 'top-up'>(textAt(item.node, 'step'), ['first', 'top-up']) ?? 'first',
      }))
      .sort((a, b) => Number(a.step === 'top-up') - Number(b.step === 'top-up')),
    draws: drawsOf(node),
  };
}

function taskOf({ id, node }: { id: string; node: FieldNode }): WorksheetTask {
  const steps = [...(node.children.get('steps')?.children ?? [])].flatMap(([key, step]) =>
    step.text === undefined || step.text === '' ? [] : [[key, step.text] as const],
  );
  return {
    id,
    key: textAt(node, 'key') ?? 'free',
    ...texts(node, ['title', 'action', 'scheduleItem']),
    steps: Object.fromEntries(steps),
    fills: itemsOf(node, 'fills').map(fillOf),
    torques: itemsOf(node, 'torques').map((item) => ({
      ...amountOf(item),
      ...texts(item.node, ['fastener', 'toolName', 'toolCalibratedOn']),
    })),
    inspections: itemsOf(node, 'inspections').map((item) => ({
      id: item.id,
      ...texts(item.node, ['subject', 'grade', 'note']),
    })),
    parts: itemsOf(node, 'parts').map((item) => ({
      id: item.id,
      ...texts(item.node, ['name', 'partNumber', 'quantity']),
      draws: drawsOf(item.node),
    })),
    levelChecks: itemsOf(node, 'levelChecks').map((item) => ({
      id: item.id,
      ...texts(item.node, ['point', 'position', 'temperature', 'reading']),
    })),
  };
}

/**
 * The worksheet its fields describe, as a typed tree. Items stand by position, then by id; removed items and fields
 * this version does not know are left out. Nothing is judged here: figures are texts as typed.
 *
 * @example worksheetFrom({ 'tasks/t1/key': 'primary' }).tasks[0]?.key // 'primary'
 */
export function worksheetFrom(fields: Fields): Worksheet {
  const root = fieldTree(fields);
  const instrument = Number(textAt(root, 'odometer/instrument') ?? '0');
  return {
    startedAt: present({ date: textAt(root, 'startedAt/date'), time: textAt(root, 'startedAt/time') }),
    finishedAt: present({ date: textAt(root, 'finishedAt/date'), time: textAt(root, 'finishedAt/time') }),
    recorded: oneOf(textAt(root, 'recorded'), ['at-the-time', 'from-paper']) ?? 'at-the-time',
    odometer: {
      instrument: Number.isSafeInteger(instrument) && instrument >= 0 ? instrument : 0,
      ...present({
        value: textAt(root, 'odometer/value'),
        unit: unitAt(root, 'odometer/unit'),
        unknownWhy: textAt(root, 'odometer/unknownWhy'),
      }),
    },
    ...texts(root, ['zone', 'engineHours', 'title', 'notes', 'statement', 'workOrder']),
    performedBy: itemsOf(root, 'performedBy').flatMap(({ id, node }) => {
      const capacity = oneOf(textAt(node, 'capacity'), ['owner', 'helper', 'shop', 'dealer']);
      return capacity === undefined ? [] : [{ id, capacity }];
    }),
    tasks: itemsOf(root, 'tasks').map(taskOf),
    photos: itemsOf(root, 'photos').map(({ id, node }) => ({
      uploadId: id,
      ...present({ role: oneOf(textAt(node, 'role'), attachmentRoles), caption: textAt(node, 'caption') }),
    })),
  };
}
