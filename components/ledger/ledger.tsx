import type { ReactNode } from 'react';

export interface LedgerProps {
  /** Says what is listed, to screen readers: "Entries of the Sorrel 1800, newest first". */
  label: string;
  /** `LedgerLine`s. */
  children: ReactNode;
}

/** A ruled page: number, the red-brown margin rule, and the line. */
export function Ledger({ label, children }: LedgerProps) {
  return (
    <ol
      role="list"
      aria-label={label}
      className="relative border border-line bg-sheet before:absolute before:inset-y-0 before:left-11 before:border-l before:border-margin lg:before:left-16"
    >
      {children}
    </ol>
  );
}
