import Link from 'next/link';
import type { ReactNode } from 'react';
import { WitnessMark, type MarkState } from '@/components/mark/witness-mark';
import { toneClasses, type Tone } from '@/components/ui/box';
import { classes } from '@/components/ui/classes';
import { Thumb, type ThumbProps } from './thumb';

export interface LedgerLineProps {
  seq: number;
  /** The whole line is the target. */
  href?: string | undefined;
  date: string;
  /** ISO form of `date`, for machines. */
  dateTime?: string | undefined;
  odometer?: string | undefined;
  title: ReactNode;
  detail?: ReactNode;
  detailTone?: Tone | undefined;
  thumbs?: ThumbProps[] | undefined;
  mark: { state: MarkState; leafHash?: string | undefined };
  /** What the mark says, under it: "sealed", "stamp to come", "struck". */
  words: string;
  wordsTone?: Tone | undefined;
  isStruck?: boolean | undefined;
  /** Set smaller, for lines that say something about the record itself. */
  isQuiet?: boolean | undefined;
}

const thumbsShown = 3;

/** One entry of a record. A desk reads it as columns; on a phone date and odometer stand above the title. */
export function LedgerLine(props: LedgerLineProps) {
  const {
    seq,
    href,
    date,
    dateTime,
    odometer,
    title,
    detail,
    detailTone = 'soft',
    mark,
    words,
    isStruck,
    isQuiet,
  } = props;
  const thumbs = props.thumbs ?? [];
  const hidden = thumbs.length - thumbsShown;
  return (
    <li
      className={classes(
        'kept-together relative grid grid-cols-[2.75rem_minmax(0,1fr)_6rem] border-b border-hair py-3 last:border-b-0',
        isQuiet ? 'lg:min-h-20' : 'lg:min-h-24',
        'lg:grid-cols-[4rem_7.5rem_7.25rem_minmax(0,1fr)_auto_7.5rem] lg:items-center lg:py-2.5',
        href && 'hover:bg-paper has-focus-visible:bg-paper',
      )}
    >
      <span className="figure row-span-3 pr-2.5 text-right text-xl font-medium text-soft lg:row-span-1">
        <span className="sr-only">Entry </span>
        {seq}
      </span>
      <div className="col-start-2 row-start-1 flex flex-wrap items-baseline gap-x-3 pl-3 lg:contents">
        <time dateTime={dateTime} className="text-[0.9375rem] text-soft lg:pl-4 lg:text-base lg:text-ink">
          {date}
        </time>
        <span className="figure text-xl lg:text-[1.375rem]">{odometer}</span>
      </div>
      <div className="col-start-2 row-start-2 min-w-0 pl-3 lg:col-start-4 lg:row-start-1 lg:pr-4 lg:pl-0">
        <p
          className={classes(
            'leading-snug',
            isQuiet ? 'font-medium' : 'text-[1.0625rem] font-semibold',
            isStruck && 'font-medium text-soft',
          )}
        >
          {href ? (
            <Link href={href} className="after:absolute after:inset-0 hover:underline underline-offset-4 decoration-1">
              <StruckText isStruck={isStruck}>{title}</StruckText>
            </Link>
          ) : (
            <StruckText isStruck={isStruck}>{title}</StruckText>
          )}
        </p>
        {detail ? (
          <p className={classes('mt-0.5 text-[0.9375rem] leading-snug', toneClasses[detailTone])}>{detail}</p>
        ) : null}
      </div>
      {thumbs.length > 0 ? (
        <div className="col-start-2 row-start-3 mt-2.5 flex flex-wrap items-center gap-1.5 pl-3 lg:flex-nowrap lg:col-start-5 lg:row-start-1 lg:mt-0 lg:justify-end">
          {thumbs.slice(0, thumbsShown).map((thumb) => (
            <Thumb key={`${thumb.src} ${thumb.alt}`} {...thumb} />
          ))}
          {hidden > 0 ? <span className="tag pl-1 whitespace-nowrap">and {hidden} more</span> : null}
        </div>
      ) : null}
      <div className="col-start-3 row-span-3 row-start-1 flex flex-col items-center gap-1 self-center px-1 text-center lg:col-start-6 lg:row-span-1">
        <WitnessMark {...mark} title={null} size={isQuiet ? 48 : 52} />
        <span className={classes('text-sm leading-tight', toneClasses[props.wordsTone ?? 'soft'])}>{words}</span>
      </div>
    </li>
  );
}

/** A single line through the title, as in a bound book: still readable, and said to a screen reader. */
function StruckText({ isStruck, children }: { isStruck: boolean | undefined; children: ReactNode }) {
  if (!isStruck) return children;
  return (
    <s className="decoration-[1.5px]">
      <span className="sr-only">Struck: </span>
      {children}
    </s>
  );
}
