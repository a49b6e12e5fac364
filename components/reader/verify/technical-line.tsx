import type { ReactNode } from 'react';

/** What only somebody who looks closer reads: folded on the screen, open on paper (see `usePrintOpen`). */
export function TechnicalLine({ children }: { children: ReactNode }) {
  return (
    <details className="tag" data-technical>
      <summary className="inline-flex min-h-11 items-center underline underline-offset-4 print:hidden">
        Technical line
      </summary>
      {children}
    </details>
  );
}
