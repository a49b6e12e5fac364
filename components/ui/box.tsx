import type { ReactNode } from 'react';
import { classes } from './classes';

export type Tone = 'plain' | 'soft' | 'warn' | 'gap';

export const toneClasses: Record<Tone, string> = { plain: '', soft: 'text-soft', warn: 'tone-warn', gap: 'tone-gap' };

export interface BoxProps {
  label: ReactNode;
  children: ReactNode;
  note?: ReactNode;
  noteTone?: Tone;
  tone?: Tone;
  /** A measurement is set large, in the condensed face. */
  isMeasure?: boolean;
  span?: 1 | 2 | 3 | 4 | 'all';
}

export interface BoxesProps {
  children: ReactNode;
  /** Cells in a row on a desk; a phone has two (or one). */
  columns?: 1 | 2 | 3 | 4 | 5;
  isOneColumnOnPhone?: boolean;
  label?: string;
  className?: string;
}

const columnClasses = {
  1: '',
  2: 'md:grid-cols-2',
  3: 'md:grid-cols-3',
  4: 'md:grid-cols-4',
  5: 'md:grid-cols-5',
} as const;

const spanClasses = {
  1: '',
  2: 'col-span-full md:col-span-2',
  3: 'col-span-full md:col-span-3',
  4: 'col-span-full md:col-span-4',
  all: 'col-span-full',
} as const;

/** The one container: a frame of cells parted by hairlines. A description list, whose cells are `Box`. */
export function Boxes({ children, columns = 1, isOneColumnOnPhone, label, className }: BoxesProps) {
  return (
    <dl
      aria-label={label}
      className={classes(
        'grid overflow-clip border border-line bg-sheet',
        isOneColumnOnPhone || columns === 1 ? 'grid-cols-1' : 'grid-cols-2',
        columnClasses[columns],
        className,
      )}
    >
      {children}
    </dl>
  );
}

export function Box({ label, children, note, noteTone = 'soft', tone = 'plain', isMeasure, span = 1 }: BoxProps) {
  return (
    <div className={classes('-mr-px -mb-px min-w-0 border-r border-b border-hair px-3 pt-2 pb-2.5', spanClasses[span])}>
      <dt className="label">{label}</dt>
      <dd
        className={classes(
          'mt-0.5',
          isMeasure ? 'figure text-[1.625rem]' : 'text-[1.0625rem] font-medium',
          toneClasses[tone],
        )}
      >
        {children}
      </dd>
      {note ? <dd className={classes('text-[0.9375rem] leading-snug', toneClasses[noteTone])}>{note}</dd> : null}
    </div>
  );
}

/** A frame without cells, for what brings rows of its own. */
export function Sheet({ children, className }: { children: ReactNode; className?: string }) {
  return <div className={classes('border border-line bg-sheet', className)}>{children}</div>;
}
