import { textWidthPx } from './text-width';

export type FlagTone = 'now' | 'limit' | 'plain';

export interface RuleFlag {
  at: number;
  text: string;
  /** now: today's reading. limit: where something ends, such as a warranty. */
  tone: FlagTone;
}

export interface PlacedFlag extends RuleFlag {
  /** Where its line stands, in per cent of the rule. */
  percent: number;
  /** Counted from the rule downwards, from 0. */
  row: number;
  widthPx: number;
  /** How far the flag's left edge lies before its line. */
  beforePx: number;
}

export const flagSizePx = 14;
export const flagPaddingPx = 9;
const flagGapPx = 6;

const numberSizePx = 16;
const numberPaddingPx = 2;
/** Figures of the condensed face need less than 0.85 of the width of Barlow's. */
const condensedShare = 0.85;

/**
 * Where a figure stands on a rule, in per cent of its length; what lies beyond an end stands on that end.
 *
 * Throws a RangeError unless `from` is below `to`.
 *
 * @example percentAt(11_000, 0, 22_000) // 50
 */
export function percentAt(at: number, from: number, to: number): number {
  if (!(from < to)) throw new RangeError('A rule runs from a lower to a higher figure.');
  const percent = ((at - from) / (to - from)) * 100;
  return Math.round(Math.min(100, Math.max(0, percent)) * 1000) / 1000;
}

/**
 * Places flags under a rule so that none overlaps another and none is cut off, at `leastPx` and at every greater width.
 *
 * A flag slides along its own line: at the rule's start the line is the flag's left edge, at the end its right edge,
 * in between in proportion. That keeps it on the rule at any width without measuring, and two flags that have room
 * at the least width have more at any other, because only the distance of their lines grows.
 *
 * Unit: px. Throws a RangeError unless `from` is below `to`.
 *
 * @example placeFlags([{ at: 14_360, text: '14,360 now', tone: 'now' }], 0, 22_000, 264)[0]?.row // 0
 */
export function placeFlags(flags: RuleFlag[], from: number, to: number, leastPx: number): PlacedFlag[] {
  const rows: PlacedFlag[][] = [];
  const inOrder = [...flags].sort((a, b) => a.at - b.at);
  return inOrder.map((flag) => {
    const percent = percentAt(flag.at, from, to);
    const widthPx = textWidthPx(flag.text, flagSizePx) + 2 * flagPaddingPx;
    const beforePx = Math.round(percent * widthPx) / 100;
    const startPx = (percent / 100) * leastPx - beforePx;
    const free = rows.findIndex((row) => row.every((other) => startPx >= endPx(other, leastPx) + flagGapPx));
    const row = free === -1 ? rows.length : free;
    const placed = { ...flag, percent, row, widthPx, beforePx };
    (rows[row] ??= []).push(placed);
    return placed;
  });
}

function endPx(flag: PlacedFlag, ruleWidthPx: number): number {
  return (flag.percent / 100) * ruleWidthPx - flag.beforePx + flag.widthPx;
}

/**
 * How far a number's middle lies right of its tick: it slides like a flag, so that it is cut off at neither end.
 *
 * Unit: px; negative is to the left.
 *
 * @example numberShiftPx(50, '10,000') // 0
 */
export function numberShiftPx(percent: number, text: string): number {
  return Math.round((50 - percent) * (textWidthPx(text, numberSizePx) * condensedShare + 2 * numberPaddingPx)) / 100;
}
