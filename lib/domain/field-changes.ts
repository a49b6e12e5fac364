/** One change of one field, minted on a device. `value` null clears the field. Instants are ISO 8601 texts. */
export interface FieldChange {
  /** Unique; orders changes of the same device instant. */
  id: string;
  /** A '/'-separated path: `tasks/<id>/fills/<id>/product`. */
  field: string;
  value: string | null;
  deviceAt: string;
  serverAt?: string;
  person?: string;
}

/** The fields that have a value now. */
export type Fields = Record<string, string>;

function isLater(a: FieldChange, b: FieldChange): boolean {
  const [timeA, timeB] = [Date.parse(a.deviceAt), Date.parse(b.deviceAt)];
  if (timeA !== timeB && !Number.isNaN(timeA) && !Number.isNaN(timeB)) return timeA > timeB;
  if (Number.isNaN(timeA) !== Number.isNaN(timeB)) return Number.isNaN(timeB);
  if (a.id !== b.id) return a.id > b.id;
  return (a.value ?? '') > (b.value ?? '');
}

/**
 * What a list of changes comes to: per field the last writer by device time, then by id. The order in which changes
 * arrive, and how often, makes no difference, so that devices that worked without signal agree once they have met.
 *
 * @example foldChanges([{ id: 'a', field: 'title', value: 'Oil', deviceAt: '2026-04-18T10:00:00.000Z' }]) // { title: 'Oil' }
 */
export function foldChanges(changes: readonly FieldChange[]): Fields {
  const last = new Map<string, FieldChange>();
  for (const change of changes) {
    const earlier = last.get(change.field);
    if (earlier === undefined || isLater(change, earlier)) last.set(change.field, change);
  }
  const kept = [...last.values()].filter((change) => change.value !== null);
  kept.sort((a, b) => (a.field < b.field ? -1 : 1));
  // fromEntries defines own members, so that a field called `__proto__` is only a field.
  return Object.fromEntries(kept.map((change) => [change.field, change.value ?? '']));
}

/** The paths as a tree: a leaf has text, a branch has children. */
export interface FieldNode {
  text?: string;
  children: Map<string, FieldNode>;
}

/**
 * The fields as a tree.
 *
 * @example fieldTree({ 'odometer/unit': 'km' }).children.get('odometer')?.children.get('unit')?.text // 'km'
 */
export function fieldTree(fields: Fields): FieldNode {
  const root: FieldNode = { children: new Map() };
  for (const [path, text] of Object.entries(fields)) {
    let node = root;
    for (const step of path.split('/')) {
      let next = node.children.get(step);
      if (next === undefined) {
        next = { children: new Map() };
        node.children.set(step, next);
      }
      node = next;
    }
    node.text = text;
  }
  return root;
}

/**
 * The text at a path below a node; what is blank counts as absent.
 *
 * @example textAt(fieldTree({ 'odometer/unit': 'km' }), 'odometer/unit') // 'km'
 */
export function textAt(node: FieldNode, path: string): string | undefined {
  let at: FieldNode | undefined = node;
  for (const step of path.split('/')) at = at?.children.get(step);
  const text = at?.text?.trim();
  return text === '' ? undefined : text;
}

/**
 * The items of a collection that are not removed, by position, then by id; those without a position come last.
 *
 * @example itemsOf(fieldTree({ 'tasks/b/position': '1', 'tasks/a/position': '2' }), 'tasks').map(({ id }) => id) // ['b', 'a']
 */
export function itemsOf(node: FieldNode, collection: string): { id: string; node: FieldNode }[] {
  const found = node.children.get(collection);
  if (found === undefined) return [];
  const items = [...found.children]
    .filter(([, child]) => child.children.size > 0 && child.children.get('removed')?.text !== 'yes')
    .map(([id, child]) => ({ id, node: child, position: positionOf(child) }));
  items.sort((a, b) => (a.position === b.position ? (a.id < b.id ? -1 : 1) : a.position - b.position));
  return items.map(({ id, node: child }) => ({ id, node: child }));
}

function positionOf(node: FieldNode): number {
  const position = Number(node.children.get('position')?.text ?? 'none');
  return Number.isFinite(position) ? position : Number.MAX_SAFE_INTEGER;
}
