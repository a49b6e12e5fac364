import { useId } from 'react';
import { percentAt, type RuleFlag } from './layout';
import { FlagLines, leastRulePx, wideRulePx, type Span } from './rule-parts';
import { textWidthPx } from './text-width';

export interface LaneMark {
  at: number;
  /** "Entry 28, 19 Oct 2025, 10,238 mi". */
  title: string;
  isLate?: boolean | undefined;
}

export interface LaneInterval {
  from: number;
  to: number;
  /** "4,898 mi". */
  text: string;
  isLate?: boolean | undefined;
}

export interface LaneDrawingProps {
  span: Span;
  now?: number | undefined;
  done: LaneMark[];
  limit?: number | undefined;
  isOver?: boolean | undefined;
  intervals: LaneInterval[];
  flags: RuleFlag[];
}

const heightPx = 46;
const midPx = 25;
const hatchPx = 20;
const notchPx = 12;

/** An interval's words appear only where they fit between their notches; a phone leaves them to the record. */
function intervalClasses(percent: number, text: string): string | null {
  const neededPx = textWidthPx(text, 14) + notchPx;
  if ((percent / 100) * leastRulePx >= neededPx) return 'hidden @2xl:inline';
  return (percent / 100) * wideRulePx >= neededPx ? 'hidden @4xl:inline' : null;
}

/** One lane: ridden up to now, notches where the work was done, the limit hatched. */
export function LaneDrawing({ span, now, done, limit, isOver, intervals, flags }: LaneDrawingProps) {
  const hatch = useId();
  const x = (at: number) => `${percentAt(at, span.from, span.to)}%`;
  const isLimitShown = limit !== undefined && limit >= span.from && limit <= span.to;
  return (
    <svg aria-hidden="true" width="100%" height={heightPx} className="block overflow-visible">
      <defs>
        <pattern id={hatch} width="6" height="6" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
          <path d="M1 0V6" className="stroke-margin stroke-2" />
        </pattern>
      </defs>
      <line x1="0" x2="100%" y1={midPx} y2={midPx} className="stroke-line stroke-[1.5]" />
      {now === undefined ? null : <line x1="0" x2={x(now)} y1={midPx} y2={midPx} className="stroke-soft stroke-2" />}
      <FlagLines span={span} flags={flags} y1={0} y2={heightPx} />
      {isLimitShown ? (
        <svg x={x(limit)} y={midPx - 11} className="overflow-visible">
          {isOver && now !== undefined ? null : <rect width={hatchPx} height={22} fill={`url(#${hatch})`} />}
          <path d="M0 -2V24" className="fill-none stroke-margin stroke-[2.5]" />
        </svg>
      ) : null}
      {isLimitShown && isOver && now !== undefined ? (
        <rect
          x={x(limit)}
          y={midPx - 11}
          width={`${Math.max(0, percentAt(now, span.from, span.to) - percentAt(limit, span.from, span.to))}%`}
          height={22}
          fill={`url(#${hatch})`}
        />
      ) : null}
      {intervals.map(({ from, to, text, isLate }) => {
        const [start, end] = [percentAt(from, span.from, span.to), percentAt(to, span.from, span.to)];
        const shown = intervalClasses(end - start, text);
        if (shown === null) return null;
        return (
          <text
            key={`${from} ${to}`}
            x={`${(start + end) / 2}%`}
            y={midPx - 8}
            textAnchor="middle"
            className={`text-sm ${shown} ${isLate ? 'fill-gap font-semibold' : 'fill-soft'}`}
          >
            {text}
          </text>
        );
      })}
      {done.map(({ at, title, isLate }) => (
        <svg key={`${at} ${title}`} x={x(at)} y={midPx - 11} className="overflow-visible">
          <title>{title}</title>
          <path d="M-6 0H6L1.2 10V22H-1.2V10Z" className={isLate ? 'fill-gap' : 'fill-petrol'} />
        </svg>
      ))}
    </svg>
  );
}
