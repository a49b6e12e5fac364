import { describe, expect, it } from 'vitest';
import { boxBetween, boxesAfter, boxWords, middleBox, noBoxes, type BoxStep } from '@/components/black-out/box-state';
import { mostBoxes } from '@/lib/domain/black-boxes';

// The rules are this project's own.
const after = (...steps: BoxStep[]) => steps.reduce(boxesAfter, noBoxes);
const add: BoxStep = { do: 'add', box: middleBox };
const press = (key: string, isSizing = false): BoxStep => ({ do: 'change', index: 0, key, isSizing });

describe('boxes over a picture', () => {
  it('are moved and sized by arrow keys, a hundredth of the picture at a time, and stay within it', () => {
    const moved = after(add, press('ArrowRight'), press('ArrowUp'), press('ArrowLeft', true)).boxes[0]!;
    expect(boxWords(moved, 0)).toBe('Box 1: 41 % from the left, 39 % from the top, 19 % wide, 20 % high');
    const far = after(add, ...Array.from({ length: 90 }, () => press('ArrowRight'))).boxes[0]!;
    expect(far.left + far.width).toBeCloseTo(1);
    const small = after(add, ...Array.from({ length: 90 }, () => press('ArrowUp', true))).boxes[0]!;
    expect(small.height).toBeCloseTo(0.01);
  });
  it('come back by undo, step by step, until there is nothing to take back', () => {
    const undo: BoxStep = { do: 'undo' };
    expect(after(add, { do: 'remove', index: 0 }).boxes).toEqual([]);
    expect(after(add, { do: 'remove', index: 0 }, undo).boxes).toEqual([middleBox]);
    expect(after(add, press('ArrowDown'), undo).boxes).toEqual([middleBox]);
    expect(after(add, undo, undo).boxes).toEqual([]);
  });
  it('are no more than one picture takes', () => {
    expect(after(...Array.from({ length: mostBoxes + 5 }, () => add)).boxes).toHaveLength(mostBoxes);
  });
  it('lie between two corners in any order, within the picture, and not where nothing was meant', () => {
    const box = boxBetween({ x: 0.75, y: 1.4 }, { x: 0.25, y: 0.5 });
    expect(box).toEqual({ left: 0.25, top: 0.5, width: 0.5, height: 0.5 });
    expect(boxBetween({ x: 0.5, y: 0.5 }, { x: 0.505, y: 0.9 })).toBeNull();
  });
});
