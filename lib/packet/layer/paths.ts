import { figure } from './colours';

/** Where a drawing's own coordinates (y downwards) lie on the page: moved and scaled. */
export interface Placement {
  x: number;
  y: number;
  scale: number;
}

const parametersOf: Record<string, number> = { M: 2, L: 2, H: 1, V: 1, C: 6, A: 7, Z: 0 };
/** Control points of a quarter circle lie this far out, in radii. */
const quarterCircle = 0.5522847498;

/**
 * SVG path data (M L H V C A Z, either case) as PDF path operators. Arcs are half circles only, as in a circle.
 *
 * @throws Error for a command it does not know
 */
export function pathOperators(data: string, { x, y, scale }: Placement, pageHeight: number): string {
  const tokens = data.match(/[a-z]|-?(?:\d+\.?\d*|\.\d+)(?:e-?\d+)?/gi) ?? [];
  const operators: string[] = [];
  let [cx, cy, startX, startY] = [0, 0, 0, 0];
  let command = '';
  let i = 0;
  const place = (px: number, py: number) => `${figure(x + px * scale)} ${figure(pageHeight - (y + py * scale))}`;
  const place6 = ([x1, y1, x2, y2, x3, y3]: Curve) => `${place(x1, y1)} ${place(x2, y2)} ${place(x3, y3)} c`;
  while (i < tokens.length) {
    if (/[a-z]/i.test(tokens[i] ?? '')) command = tokens[i++] ?? '';
    const kind = command.toUpperCase();
    const count = parametersOf[kind];
    if (count === undefined) throw new Error(`A drawing holds the unknown path command ${command}.`);
    const figures = tokens.slice(i, i + count).map(Number);
    i += count;
    const isRelative = command !== kind;
    const [dx, dy] = isRelative ? [cx, cy] : [0, 0];
    const [a = 0, b = 0, c = 0, d = 0, e = 0, f = 0, g = 0] = figures;
    if (kind === 'M' || kind === 'L') {
      [cx, cy] = [a + dx, b + dy];
      if (kind === 'M') [startX, startY] = [cx, cy];
      operators.push(`${place(cx, cy)} ${kind === 'M' ? 'm' : 'l'}`);
      if (kind === 'M') command = isRelative ? 'l' : 'L';
    } else if (kind === 'H' || kind === 'V') {
      if (kind === 'H') cx = a + dx;
      else cy = a + dy;
      operators.push(`${place(cx, cy)} l`);
    } else if (kind === 'C') {
      operators.push(`${place(a + dx, b + dy)} ${place(c + dx, d + dy)} ${place(e + dx, f + dy)} c`);
      [cx, cy] = [e + dx, f + dy];
    } else if (kind === 'A') {
      operators.push(...halfCircle([cx, cy], [f + dx, g + dy], e === 1).map(place6));
      [cx, cy] = [f + dx, g + dy];
    } else {
      operators.push('h');
      [cx, cy] = [startX, startY];
      command = '';
      if (i < tokens.length && !/[a-z]/i.test(tokens[i] ?? '')) throw new Error('A drawing goes on after its end.');
    }
  }
  return operators.join(' ');
}

type Curve = [number, number, number, number, number, number];

/** A half circle over its diameter as two curves; `isSweep`: with growing angle, that is clockwise on the page. */
function halfCircle([x1, y1]: [number, number], [x2, y2]: [number, number], isSweep: boolean): Curve[] {
  const [cx, cy] = [(x1 + x2) / 2, (y1 + y2) / 2];
  const turn = isSweep ? 1 : -1;
  // From the centre: to the start, and a quarter turn on.
  const [sx, sy] = [x1 - cx, y1 - cy];
  const [qx, qy] = [-sy * turn, sx * turn];
  const k = quarterCircle;
  return [
    [cx + sx + k * qx, cy + sy + k * qy, cx + qx + k * sx, cy + qy + k * sy, cx + qx, cy + qy],
    [cx + qx - k * sx, cy + qy - k * sy, cx - sx + k * qx, cy - sy + k * qy, x2, y2],
  ];
}
