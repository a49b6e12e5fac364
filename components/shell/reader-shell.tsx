import type { ReactNode } from 'react';
import { paths } from '@/lib/paths';
import { DemoStrip, type Demo } from './demo-strip';
import { SkipLink } from './skip-link';
import { Word } from './word';

export interface ReaderShellProps {
  /** What this page is: "Viewing link, read-only". */
  words: ReactNode;
  demo: Demo;
  actions?: ReactNode;
  children: ReactNode;
}

/** For somebody without an account: a plain head, no navigation, nothing to find one's way through. */
export function ReaderShell({ words, demo, actions, children }: ReaderShellProps) {
  return (
    <div className="min-h-dvh">
      <SkipLink />
      <header className="border-b border-line bg-sheet">
        <div className="mx-auto flex max-w-[72rem] flex-wrap items-center gap-x-5 gap-y-1 px-4 py-1.5 md:px-9 print:px-0">
          <Word href={paths.home} size="small" />
          <p className="tag">{words}</p>
          {actions ? <div className="not-printed ml-auto flex flex-wrap gap-2.5">{actions}</div> : null}
        </div>
      </header>
      <DemoStrip demo={demo} />
      <main
        id="content"
        tabIndex={-1}
        className="mx-auto max-w-[72rem] px-4 pt-6 pb-16 outline-none md:px-9 md:pt-9 print:p-px"
      >
        {children}
      </main>
    </div>
  );
}
