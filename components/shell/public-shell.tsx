import Link from 'next/link';
import type { ReactNode } from 'react';
import { paths } from '@/lib/paths';
import { DemoStrip, type Demo } from './demo-strip';
import { SkipLink } from './skip-link';
import { Word } from './word';

export interface PublicShellProps {
  demo: Demo;
  /** narrow: one form. wide: the landing page. */
  width?: 'narrow' | 'wide';
  children: ReactNode;
}

const headLink =
  'inline-flex min-h-11 items-center px-2 font-medium text-spine-soft hover:text-spine-ink hover:underline underline-offset-4';

/** Head and foot of the pages anybody may read. */
export function PublicShell({ demo, width = 'narrow', children }: PublicShellProps) {
  return (
    <div className="flex min-h-dvh flex-col">
      <SkipLink />
      <header className="on-spine not-printed bg-spine text-spine-ink">
        <div className="mx-auto flex max-w-[72rem] flex-wrap items-center justify-between gap-x-4 px-4 py-2 md:px-9">
          <Word href={paths.home} />
          <nav aria-label="Places" className="-mx-2 flex flex-wrap">
            <Link href={paths.verify} className={headLink}>
              Check a packet
            </Link>
            <Link href={paths.signIn} className={headLink}>
              Sign in
            </Link>
          </nav>
        </div>
      </header>
      <DemoStrip demo={demo} />
      <main
        id="content"
        tabIndex={-1}
        className={`mx-auto w-full flex-auto px-4 pt-8 pb-16 outline-none md:px-9 md:pt-12 ${
          width === 'wide' ? 'max-w-[72rem]' : 'max-w-[36rem]'
        }`}
      >
        {children}
      </main>
      <PublicFoot />
    </div>
  );
}

function PublicFoot() {
  return (
    <footer className="not-printed border-t border-line">
      <div className="tag mx-auto flex max-w-[72rem] flex-wrap items-center gap-x-6 px-4 py-2 md:px-9">
        <Link href={paths.method} className="link inline-flex min-h-11 items-center">
          How the record is kept and checked
        </Link>
        <Link href={paths.privacy} className="link inline-flex min-h-11 items-center">
          What is kept about you
        </Link>
        <p>Not legal advice; your warranty’s text and the law where you live decide.</p>
      </div>
    </footer>
  );
}
