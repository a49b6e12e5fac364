import { classes } from '@/components/ui/classes';
import { markGeometry, type MarkPart, type MarkState } from '@/lib/domain/mark-geometry';

export type { MarkState } from '@/lib/domain/mark-geometry';

export interface WitnessMarkProps {
  /** Hex; turns the stripe a little, so that each entry's mark is its own. */
  leafHash?: string | undefined;
  state: MarkState;
  /** Edge in px; at least 48 in the ledger. */
  size?: number | undefined;
  /** Text alternative. `null` where the words stand beside the mark already. */
  title?: string | null | undefined;
  /** Plays the seal once: the head turns home and the stripe is drawn. Not under reduced motion. */
  animate?: boolean | undefined;
  className?: string | undefined;
}

export const markTitles: Record<MarkState, string> = {
  sealed: 'Witness mark whole: sealed',
  countersigned: 'Witness mark whole: sealed and countersigned',
  waiting: 'Witness mark in outline: sealed, time stamp still to come',
  struck: 'Witness mark struck through',
  altered: 'Witness mark broken: altered',
};

const partClasses: Record<MarkPart, string> = {
  washer: 'fill-steel stroke-ink stroke-[1.6]',
  head: 'fill-sheet stroke-ink stroke-[1.8]',
  chamfer: 'fill-none stroke-edge stroke-[0.9]',
  stripe: 'fill-lacquer stroke-[#15211f] stroke-[1.2]',
  outline: 'fill-none stroke-ink stroke-[1.6] [stroke-dasharray:3.2_2.2]',
  strike: 'fill-none stroke-ink stroke-[2.6]',
};

export function WitnessMark({ leafHash, state, size = 48, title, animate, className }: WitnessMarkProps) {
  const { box, stripeDegrees, shapes } = markGeometry(state, leafHash);
  const alternative = title === undefined ? markTitles[state] : title;
  const lean = `rotate(${stripeDegrees.toFixed(2)} ${box / 2} ${box / 2})`;
  const upright = `rotate(${(-stripeDegrees).toFixed(2)} ${box / 2} ${box / 2})`;
  return (
    <svg
      viewBox={`0 0 ${box} ${box}`}
      width={size}
      height={size}
      {...(alternative === null ? { 'aria-hidden': true } : { role: 'img', 'aria-label': alternative })}
      className={classes('inline-block overflow-visible', className)}
      strokeLinejoin="round"
    >
      {shapes.map(({ part, d }, index) => {
        const path = (
          <path
            key={index}
            d={d}
            className={classes(
              partClasses[part],
              state === 'struck' && part !== 'strike' && 'opacity-45',
              animate && (part === 'head' || part === 'chamfer') && 'mark-head-home',
            )}
          />
        );
        if (!animate || (part !== 'stripe' && part !== 'outline')) return path;
        // Stood upright for the motion, so that the stripe grows along its own length.
        return (
          <g key={index} transform={lean}>
            <g className="mark-stripe-drawn">
              <g transform={upright}>{path}</g>
            </g>
          </g>
        );
      })}
    </svg>
  );
}
