import type { ReactNode } from 'react';
import { classes } from './classes';

export interface NoticeProps {
  /** warn: take care before going on. gap: something the reader will find missing or wrong. */
  tone?: 'plain' | 'warn' | 'gap';
  title?: ReactNode;
  children?: ReactNode;
  actions?: ReactNode;
  /** Set when the notice appears after something was done, so that a screen reader hears it. */
  isLive?: boolean;
}

const edges = { plain: 'border-l-petrol', warn: 'border-l-warn', gap: 'border-l-gap' } as const;
const titles = { plain: 'text-ink', warn: 'text-warn', gap: 'text-gap' } as const;

export function Notice({ tone = 'plain', title, children, actions, isLive }: NoticeProps) {
  const role = isLive ? (tone === 'gap' ? 'alert' : 'status') : undefined;
  return (
    <div
      role={role}
      className={classes(
        'flex flex-wrap items-center justify-between gap-x-6 gap-y-3 border border-l-4 border-line bg-sheet py-3 pr-4 pl-3.5',
        edges[tone],
      )}
    >
      <div className="min-w-0 max-w-[70ch]">
        {title ? <p className={classes('font-semibold', titles[tone])}>{title}</p> : null}
        {children ? <div className={title ? 'mt-0.5' : ''}>{children}</div> : null}
      </div>
      {actions ? <div className="flex flex-wrap gap-2.5">{actions}</div> : null}
    </div>
  );
}
