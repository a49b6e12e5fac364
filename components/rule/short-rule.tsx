import { percentAt } from './layout';
import { ruleTicks } from '@/lib/domain/rule-ticks';

export interface ShortRuleProps {
  from: number;
  to: number;
  /** The specified band; a single specified figure is a band of no width. */
  band: { min: number; max: number };
  value?: number | undefined;
  /** Decided by exact arithmetic outside this drawing; only then is the band painted. */
  isMet: boolean;
  /** "specified 30", "14 to 21 lbf·ft". */
  bandText: string;
  /** The value in another unit, or what is wrong with it. */
  valueText?: string | undefined;
  /** The whole in words: "19 lbf·ft, within 14 to 21". */
  title: string;
}

const heightPx = 22;
const leastBandPx = 8;

/** The rule under a fill or torque entry: specified band in lacquer once it is met, the value as a pointer. */
export function ShortRule({ from, to, band, value, isMet, bandText, valueText, title }: ShortRuleProps) {
  const at = (figure: number) => percentAt(figure, from, to);
  const [start, end] = [at(band.min), at(band.max)];
  const isBandRight = (start + end) / 2 > 45;
  const isBeyond = value !== undefined && (value > to || value < from);
  const bandWords = <span className="text-ink">{bandText}</span>;
  return (
    <figure className="my-2">
      <svg role="img" aria-label={title} width="100%" height={heightPx + 12} className="block overflow-visible">
        <rect y={6} width="100%" height={heightPx} className="fill-steel stroke-edge" />
        <Band {...{ start, end, isMet }} />
        {ruleTicks(from, to).map((tick) => (
          <line
            key={tick.at}
            x1={`${at(tick.at)}%`}
            x2={`${at(tick.at)}%`}
            y1={6 + heightPx - { major: 11, mid: 8, minor: 4 }[tick.level]}
            y2={6 + heightPx}
            className={tick.level === 'minor' ? 'stroke-soft stroke-[0.8]' : 'stroke-soft'}
          />
        ))}
        {value === undefined ? null : (
          <svg x={`${at(value)}%`} className="overflow-visible">
            {isBeyond ? (
              <path d={value > to ? 'M-12 8V26L0 17Z' : 'M12 8V26L0 17Z'} className="fill-gap stroke-sheet" />
            ) : (
              <path
                d="M-6 0H6L1.75 7V34H-1.75V7Z"
                className={isMet ? 'fill-ink stroke-sheet stroke-[0.75]' : 'fill-gap stroke-sheet stroke-[0.75]'}
              />
            )}
          </svg>
        )}
      </svg>
      <figcaption aria-hidden="true" className="tag mt-1 flex flex-wrap justify-between gap-x-4">
        {isBandRight ? (
          <>
            <span>{valueText}</span>
            {bandWords}
          </>
        ) : (
          <>
            {bandWords}
            <span>{valueText}</span>
          </>
        )}
      </figcaption>
    </figure>
  );
}

function Band({ start, end, isMet }: { start: number; end: number; isMet: boolean }) {
  const paint = isMet ? 'fill-lacquer stroke-[#15211f]' : 'fill-sheet stroke-ink [stroke-dasharray:4_2]';
  if (end > start)
    return (
      <rect x={`${start}%`} y={6} width={`${end - start}%`} height={heightPx} className={`${paint} stroke-[1.2]`} />
    );
  return (
    <svg x={`${start}%`} y={6} className="overflow-visible">
      <rect x={-leastBandPx / 2} width={leastBandPx} height={heightPx} className={`${paint} stroke-[1.2]`} />
    </svg>
  );
}
