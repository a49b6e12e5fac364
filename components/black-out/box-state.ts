import { mostBoxes, type PictureBox } from '@/lib/domain/black-boxes';

export interface Boxes {
  boxes: readonly PictureBox[];
  /** What stood before each step, oldest first. */
  past: readonly (readonly PictureBox[])[];
}
export type BoxStep =
  | { do: 'add'; box: PictureBox }
  | { do: 'change'; index: number; key: string; isSizing: boolean }
  | { do: 'remove'; index: number }
  | { do: 'undo' };

export const noBoxes: Boxes = { boxes: [], past: [] };
/** Where a box stands that nobody drew. */
export const middleBox: PictureBox = { left: 0.4, top: 0.4, width: 0.2, height: 0.2 };

/** How far an arrow key goes, and how small a box gets: a hundredth of the picture. */
const step = 0.01;
const directions: Partial<Record<string, readonly [number, number]>> = {
  ArrowLeft: [-1, 0],
  ArrowRight: [1, 0],
  ArrowUp: [0, -1],
  ArrowDown: [0, 1],
};
export const isArrow = (key: string): boolean => directions[key] !== undefined;

const within = (value: number, least: number, most: number) => Math.min(Math.max(value, least), most);

/** The boxes after one step; every step but undo can be undone. */
export function boxesAfter(state: Boxes, taken: BoxStep): Boxes {
  const { boxes, past } = state;
  const to = (next: readonly PictureBox[]): Boxes => ({ boxes: next, past: [...past, boxes] });
  switch (taken.do) {
    case 'add':
      return boxes.length < mostBoxes ? to([...boxes, taken.box]) : state;
    case 'remove':
      return to(boxes.filter((_, index) => index !== taken.index));
    case 'change':
      return to(boxes.map((box, index) => (index === taken.index ? moved(box, taken) : box)));
    case 'undo':
      return past.length === 0 ? state : { boxes: past.at(-1) ?? [], past: past.slice(0, -1) };
  }
}

function moved(box: PictureBox, { key, isSizing }: { key: string; isSizing: boolean }): PictureBox {
  const [x, y] = directions[key] ?? [0, 0];
  const { left, top, width, height } = box;
  if (isSizing) {
    return {
      ...box,
      width: within(width + x * step, step, 1 - left),
      height: within(height + y * step, step, 1 - top),
    };
  }
  return { ...box, left: within(left + x * step, 0, 1 - width), top: within(top + y * step, 0, 1 - height) };
}

/** The box between two corners, within the picture; null if it is too small to be meant. */
export function boxBetween(from: Point, to: Point): PictureBox | null {
  const [ax, ay, bx, by] = [from.x, from.y, to.x, to.y].map((value) => within(value, 0, 1)) as [
    number,
    number,
    number,
    number,
  ];
  const box = { left: Math.min(ax, bx), top: Math.min(ay, by), width: Math.abs(ax - bx), height: Math.abs(ay - by) };
  return box.width < step || box.height < step ? null : box;
}
export interface Point {
  x: number;
  y: number;
}

/** `Box 2: 40 % from the left, 10 % from the top, 20 % wide, 5 % high` */
export function boxWords({ left, top, width, height }: PictureBox, index: number): string {
  const percent = (value: number) => `${Math.round(value * 100)} %`;
  return `Box ${index + 1}: ${percent(left)} from the left, ${percent(top)} from the top, ${percent(width)} wide, ${percent(height)} high`;
}
