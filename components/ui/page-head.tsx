import type { ReactNode } from 'react';

export interface PageHeadProps {
  /** Small line above: which machine, which entry, since when. */
  label?: ReactNode;
  /** The news, where there is news; otherwise the page's name. */
  title: ReactNode;
  note?: ReactNode;
  actions?: ReactNode;
  /** A witness mark, left of the title. */
  mark?: ReactNode;
}

export function PageHead({ label, title, note, actions, mark }: PageHeadProps) {
  return (
    <header className="mb-5 flex flex-wrap items-end justify-between gap-x-6 gap-y-4 md:mb-6">
      <div className="flex min-w-0 items-center gap-4 md:gap-5">
        {mark ? <div className="shrink-0">{mark}</div> : null}
        <div className="min-w-0">
          {label ? <p className="label mb-1">{label}</p> : null}
          <h1>{title}</h1>
          {note ? <p className="tag mt-1 max-w-[70ch]">{note}</p> : null}
        </div>
      </div>
      {actions ? <div className="not-printed flex flex-wrap gap-2.5">{actions}</div> : null}
    </header>
  );
}
