import { LinkButton } from './button';

export interface PagerProps {
  /** Names what is paged: "Record". */
  label: string;
  previousHref?: string | undefined;
  nextHref?: string | undefined;
  previousText?: string;
  nextText?: string;
  /** "Entries 30 to 11 of 48". */
  words: string;
}

export function Pager({ label, previousHref, nextHref, previousText, nextText, words }: PagerProps) {
  if (!previousHref && !nextHref) return null;
  return (
    <nav
      aria-label={`Pages of ${label}`}
      className="not-printed mt-4 flex flex-wrap items-center justify-between gap-3"
    >
      <span className="tag tabular-nums">{words}</span>
      <span className="flex gap-2.5">
        {previousHref ? <LinkButton href={previousHref}>{previousText ?? 'Newer'}</LinkButton> : null}
        {nextHref ? <LinkButton href={nextHref}>{nextText ?? 'Older'}</LinkButton> : null}
      </span>
    </nav>
  );
}
