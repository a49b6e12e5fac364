import type { ReactNode } from 'react';
import { PublicShell } from '@/components/shell/public-shell';
import { Sheet } from '@/components/ui/box';
import { PageHead } from '@/components/ui/page-head';
import { env } from '@/lib/env';

export interface FormPageProps {
  title: string;
  note?: ReactNode;
  /** Said above the box. */
  notice?: ReactNode;
  /** Under the box: the way to a neighbouring page. */
  after?: ReactNode;
  children: ReactNode;
}

/** A public page that is one boxed form, or one message in a box. */
export function FormPage({ title, note, notice, after, children }: FormPageProps) {
  return (
    <PublicShell demo={env.isDemo ? 'demo' : 'none'}>
      <PageHead title={title} note={note} />
      {notice ? <div className="mb-5">{notice}</div> : null}
      <Sheet className="p-4 sm:p-6">{children}</Sheet>
      {after ? <div className="mt-5 grid gap-1">{after}</div> : null}
    </PublicShell>
  );
}
