/** What a witness mark says of its entry. */
export type MarkState = 'sealed' | 'countersigned' | 'waiting' | 'struck' | 'altered';

/** What a shape is, so that screen and packet each paint it in their own way. */
export type MarkPart = 'washer' | 'head' | 'chamfer' | 'stripe' | 'outline' | 'strike';

export interface MarkShape {
  part: MarkPart;
  /** SVG path data within the 48 by 48 square, y downwards. */
  d: string;
}

export interface MarkGeometry {
  /** Edge of the square that the paths live in. */
  box: 48;
  /** How far the stripe leans from upright, clockwise, in degrees. */
  stripeDegrees: number;
  /** In painting order. */
  shapes: MarkShape[];
}

type Point = readonly [x: number, y: number];

const box = 48;
const centre = box / 2;
const washerRadius = 20;
const headRadius = 13.4;
const chamferRadius = 9.8;
const stripeHalfLength = 25.4;
const singleHalfWidth = 3.3;
const doubleHalfWidth = 2.5;
const doubleOffset = 4.6;
const restDegrees = 36;
const mostTurnDegrees = 20;
const alteredTurnDegrees = 38;

/**
 * The turn that a leaf hash gives its stripe, so that the marks of two entries differ a little.
 *
 * Unit: degrees, clockwise, from -20 up to 20. Takes the first 32 bits of the hash; without a hash the stripe rests at 0.
 * Throws a RangeError for anything that does not start with eight hex digits. Source: this project's own drawing.
 *
 * @example stripeTurn('80000000…') // 0 (to within 0.00001)
 */
export function stripeTurn(leafHash: string | undefined): number {
  if (leafHash === undefined) return 0;
  const head = /^[0-9a-f]{8}/iu.exec(leafHash)?.[0];
  if (head === undefined) throw new RangeError('A leaf hash starts with at least eight hex digits.');
  return (Number.parseInt(head, 16) / 0xffffffff) * 2 * mostTurnDegrees - mostTurnDegrees;
}

/**
 * The shapes of a witness mark, in painting order, within a 48 by 48 square: a bolt head on its washer with a stripe
 * of lacquer over both. Altered: the head has turned and took its piece of the stripe along.
 *
 * Errors: as `stripeTurn`. Source: this project's own drawing.
 *
 * @example markGeometry('sealed', leafHash).shapes.map((shape) => shape.part) // ['washer', 'head', 'chamfer', 'stripe']
 */
export function markGeometry(state: MarkState, leafHash?: string): MarkGeometry {
  const stripeDegrees = restDegrees + stripeTurn(leafHash);
  const headTurn = state === 'altered' ? alteredTurnDegrees : 0;
  const head = hexagon(headTurn);
  const bolt: MarkShape[] = [
    { part: 'washer', d: circle(washerRadius) },
    { part: 'head', d: polygon(head) },
    { part: 'chamfer', d: circle(chamferRadius) },
  ];
  const single = stripe(stripeDegrees, 0, singleHalfWidth);
  const shapesOf: Record<MarkState, () => MarkShape[]> = {
    sealed: () => [...bolt, { part: 'stripe', d: polygon(single) }],
    countersigned: () => [
      ...bolt,
      { part: 'stripe', d: polygon(stripe(stripeDegrees, -doubleOffset, doubleHalfWidth)) },
      { part: 'stripe', d: polygon(stripe(stripeDegrees, doubleOffset, doubleHalfWidth)) },
    ],
    waiting: () => [...bolt, { part: 'outline', d: polygon(single) }],
    struck: () => [...bolt, { part: 'strike', d: `M1 ${centre}H${box - 1}` }],
    altered: () => {
      const [washer, ...top] = bolt as [MarkShape, ...MarkShape[]];
      const torn = clip(stripe(stripeDegrees + headTurn, 0, singleHalfWidth), head);
      return [washer, { part: 'stripe', d: polygon(single) }, ...top, { part: 'stripe', d: polygon(torn) }];
    },
  };
  return { box, stripeDegrees, shapes: shapesOf[state]() };
}

function turned([x, y]: Point, degrees: number): Point {
  const angle = (degrees * Math.PI) / 180;
  const [dx, dy] = [x - centre, y - centre];
  return [centre + dx * Math.cos(angle) - dy * Math.sin(angle), centre + dx * Math.sin(angle) + dy * Math.cos(angle)];
}

function hexagon(degrees: number): Point[] {
  return Array.from({ length: 6 }, (_, corner) => turned([centre, centre - headRadius], degrees + corner * 60));
}

function stripe(degrees: number, offset: number, halfWidth: number): Point[] {
  const [left, right] = [centre + offset - halfWidth, centre + offset + halfWidth];
  const [top, bottom] = [centre - stripeHalfLength, centre + stripeHalfLength];
  const corners: Point[] = [
    [left, top],
    [right, top],
    [right, bottom],
    [left, bottom],
  ];
  return corners.map((corner) => turned(corner, degrees));
}

/** Sutherland and Hodgman's clipping of a polygon by a convex one; both run clockwise on the screen. */
function clip(subject: Point[], convex: Point[]): Point[] {
  return convex.reduce((left, from, index) => {
    const to = convex[(index + 1) % convex.length]!;
    const side = ([x, y]: Point) => (to[0] - from[0]) * (y - from[1]) - (to[1] - from[1]) * (x - from[0]);
    return left.flatMap((point, at) => {
      const before = left[(at + left.length - 1) % left.length]!;
      const [sideBefore, sideHere] = [side(before), side(point)];
      const share = sideBefore / (sideBefore - sideHere);
      const crossing: Point = [before[0] + share * (point[0] - before[0]), before[1] + share * (point[1] - before[1])];
      if (sideHere >= 0) return sideBefore >= 0 ? [point] : [crossing, point];
      return sideBefore >= 0 ? [crossing] : [];
    });
  }, subject);
}

function polygon(points: Point[]): string {
  return `M${points.map(([x, y]) => `${round(x)} ${round(y)}`).join('L')}Z`;
}

/** Two half arcs, because path data has no circle and the packet draws path data only. */
function circle(radius: number): string {
  const arc = `A${radius} ${radius} 0 0 1`;
  return `M${round(centre - radius)} ${centre}${arc} ${round(centre + radius)} ${centre}${arc} ${round(centre - radius)} ${centre}Z`;
}

function round(value: number): number {
  return Math.round(value * 100) / 100;
}
