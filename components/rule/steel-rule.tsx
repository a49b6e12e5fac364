import Link from 'next/link';
import { classes } from '@/components/ui/classes';
import { LaneDrawing, type LaneInterval, type LaneMark } from './lane-drawing';
import type { RuleFlag } from './layout';
import { EngravedBand, FlagStrip, leastRulePx, wideRulePx, type Span } from './rule-parts';
import { ruleTicks, type RuleTick } from '@/lib/domain/rule-ticks';

export type { LaneInterval, LaneMark, RuleFlag };

export interface RuleLane {
  label: string;
  href?: string | undefined;
  /** Where it was done; each becomes a notch. */
  done: LaneMark[];
  /** Where it falls due; left out when that lies beyond the rule. */
  limit?: number | undefined;
  /** "in 640 mi, about 2 May". Stands in a column of its own. */
  dueText: string;
  isOver?: boolean | undefined;
  intervals?: LaneInterval[] | undefined;
}

export interface SteelRuleProps {
  /** Names the drawing for screen readers: "What is due, by distance". */
  label: string;
  /** "mi", "km", "years": beside the rule. */
  unit: string;
  from: number;
  to: number;
  now?: number | undefined;
  lanes: RuleLane[];
  flags: RuleFlag[];
  /** For a rule in time pass `timeTicks(from, to)`. */
  ticks?: RuleTick[] | undefined;
}

const columns = '@2xl:grid @2xl:grid-cols-[9.5rem_minmax(0,1fr)_11.5rem] @2xl:gap-x-5';

/** Distance (or time) as an engraved rule with a lane for each item. Positions are per cents, so it fits any width. */
export function SteelRule({ label, unit, from, to: end, now, lanes, flags, ticks }: SteelRuleProps) {
  const span: Span = { from, to: end > from ? end : from + 1 };
  return (
    <section aria-label={label} className="kept-together @container border border-line bg-sheet px-3 pt-3 pb-3 sm:px-4">
      <div className={columns}>
        <span className="tag col-start-3 row-start-1 block self-center pb-1 @2xl:pb-0">{unit}</span>
        <div className="col-start-2 row-start-1">
          <EngravedBand span={span} ticks={ticks ?? ruleTicks(span.from, span.to)} flags={flags} />
        </div>
      </div>
      <ul role="list">
        {lanes.map((lane) => (
          <Lane key={lane.label} lane={lane} span={span} now={now} flags={flags} />
        ))}
      </ul>
      <div className={columns}>
        <div className="col-start-2 @4xl:hidden">
          <FlagStrip span={span} flags={flags} leastPx={leastRulePx} />
        </div>
        <div className="col-start-2 hidden @4xl:block">
          <FlagStrip span={span} flags={flags} leastPx={wideRulePx} />
        </div>
      </div>
      {flags.length > 0 ? (
        <ul className="sr-only" aria-label="Marked on the rule">
          {flags.map((flag) => (
            <li key={`${flag.at} ${flag.text}`}>{flag.text}</li>
          ))}
        </ul>
      ) : null}
    </section>
  );
}

interface LaneProps {
  lane: RuleLane;
  span: Span;
  now: number | undefined;
  flags: RuleFlag[];
}

function Lane({ lane, span, now, flags }: LaneProps) {
  const { label, href, done, limit, dueText, isOver, intervals = [] } = lane;
  return (
    <li className={classes(columns, 'flex flex-wrap items-center justify-between gap-x-4 pt-2.5 @2xl:pt-0')}>
      <span className="font-medium leading-tight">
        {href ? (
          <Link
            href={href}
            className="inline-flex min-h-7 items-center underline-offset-4 decoration-1 hover:underline @2xl:min-h-11"
          >
            {label}
          </Link>
        ) : (
          label
        )}
      </span>
      <span
        className={classes(
          'text-right leading-tight text-balance tabular-nums @2xl:col-start-3 @2xl:row-start-1 @2xl:text-left',
          isOver ? 'tone-gap' : '',
        )}
      >
        <span className="sr-only">{isOver ? 'Overdue: ' : 'Due: '}</span>
        {dueText}
      </span>
      <div className="w-full min-w-0 @2xl:col-start-2 @2xl:row-start-1">
        <LaneDrawing {...{ span, now, done, limit, isOver, intervals, flags }} />
        <span className="sr-only">
          {done.length === 0 ? 'Not done yet on this rule.' : `Done: ${done.map(({ title }) => title).join('; ')}.`}
          {intervals.length > 0 ? ` Between: ${intervals.map(({ text }) => text).join(', ')}.` : null}
        </span>
      </div>
    </li>
  );
}
