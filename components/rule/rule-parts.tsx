import { flagSizePx, numberShiftPx, percentAt, placeFlags, type FlagTone, type RuleFlag } from './layout';
import type { RuleTick } from '@/lib/domain/rule-ticks';

export interface Span {
  from: number;
  to: number;
}

/** The narrowest a rule gets: a phone of 320 px less the margins of page and sheet. */
export const leastRulePx = 264;

/** The narrowest a rule gets on a desk, between its two columns of words. */
export const wideRulePx = 480;

const tickHeights = { major: 20, mid: 13, minor: 7 } as const;
const bandHeightPx = 36;

/** The engraved band with its numbers. */
export function EngravedBand({ span, ticks, flags }: { span: Span; ticks: RuleTick[]; flags: RuleFlag[] }) {
  return (
    <svg aria-hidden="true" width="100%" height={bandHeightPx} className="block overflow-visible">
      <rect width="100%" height={bandHeightPx} className="fill-steel stroke-edge" />
      {ticks.map(({ at, level }) => {
        const x = `${percentAt(at, span.from, span.to)}%`;
        return (
          <line
            key={at}
            x1={x}
            x2={x}
            y1={bandHeightPx - tickHeights[level]}
            y2={bandHeightPx}
            className={
              level === 'major'
                ? 'stroke-ink stroke-[1.6]'
                : level === 'mid'
                  ? 'stroke-ink'
                  : 'hidden stroke-soft @2xl:inline'
            }
          />
        );
      })}
      {ticks.map(({ at, text }) => {
        if (text === undefined) return null;
        const percent = percentAt(at, span.from, span.to);
        return (
          <text
            key={at}
            x={`${percent}%`}
            dx={numberShiftPx(percent, text)}
            y={14}
            textAnchor="middle"
            className="figure fill-ink text-sm @2xl:text-base"
          >
            {text}
          </text>
        );
      })}
      <FlagLines span={span} flags={flags} y1={bandHeightPx - tickHeights.mid} y2={bandHeightPx} />
    </svg>
  );
}

const lineClasses: Record<FlagTone, string> = {
  now: 'stroke-ink stroke-2',
  limit: 'stroke-margin stroke-2 [stroke-dasharray:5_3]',
  plain: 'stroke-soft [stroke-dasharray:2_3]',
};

const flagClasses: Record<FlagTone, { box: string; text: string }> = {
  now: { box: 'fill-ink', text: 'fill-paper' },
  limit: { box: 'fill-margin', text: 'fill-margin-ink' },
  plain: { box: 'fill-sheet stroke-soft', text: 'fill-ink' },
};

interface FlagLinesProps {
  span: Span;
  flags: RuleFlag[];
  y1: number;
  y2: number;
}

/** Each strip draws its own piece of every flag's line, so that on a phone no line runs through the words between. */
export function FlagLines({ span, flags, y1, y2 }: FlagLinesProps) {
  return flags.map((flag) => {
    const x = `${percentAt(flag.at, span.from, span.to)}%`;
    return <line key={`${flag.at} ${flag.text}`} x1={x} x2={x} y1={y1} y2={y2} className={lineClasses[flag.tone]} />;
  });
}

const flagRowPx = 30;
const flagHeightPx = 24;

export interface FlagStripProps {
  span: Span;
  flags: RuleFlag[];
  leastPx: number;
}

/** The flags themselves, in as many rows as they need at `leastPx`. */
export function FlagStrip({ span, flags, leastPx }: FlagStripProps) {
  const placed = placeFlags(flags, span.from, span.to, leastPx);
  const rows = Math.max(0, ...placed.map((flag) => flag.row + 1));
  if (rows === 0) return null;
  return (
    <svg aria-hidden="true" width="100%" height={rows * flagRowPx + 2} className="block overflow-visible">
      {placed.map((flag) => (
        <line
          key={`${flag.at} ${flag.text}`}
          x1={`${flag.percent}%`}
          x2={`${flag.percent}%`}
          y1={0}
          y2={flag.row * flagRowPx + 8}
          className={lineClasses[flag.tone]}
        />
      ))}
      {placed.map((flag) => (
        <svg
          key={`${flag.at} ${flag.text}`}
          x={`${flag.percent}%`}
          y={flag.row * flagRowPx + 6}
          className="overflow-visible"
        >
          <g transform={`translate(${-flag.beforePx} 0)`}>
            <rect width={flag.widthPx} height={flagHeightPx} className={flagClasses[flag.tone].box} />
            <text
              x={flag.widthPx / 2}
              y={17}
              fontSize={flagSizePx}
              textAnchor="middle"
              className={`font-semibold tabular-nums ${flagClasses[flag.tone].text}`}
            >
              {flag.text}
            </text>
          </g>
        </svg>
      ))}
    </svg>
  );
}
