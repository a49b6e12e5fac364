import type { ReactNode } from 'react';

export interface DockProps {
  children: ReactNode;
  /** False where there is no bottom bar: in the reader's and the public shell. */
  isAboveBar?: boolean;
}

/** The page's main actions: docked at the foot of a phone, in the run of the page on a desk. */
export function Dock({ children, isAboveBar = true }: DockProps) {
  return (
    <div
      className={`not-printed fixed inset-x-0 z-10 flex gap-2.5 border-t border-line bg-paper px-4 py-3 *:flex-1 lg:static lg:mt-6 lg:border-0 lg:px-0 lg:*:flex-none ${
        isAboveBar
          ? 'bottom-[calc(3.5rem+env(safe-area-inset-bottom))]'
          : 'bottom-0 pb-[max(0.75rem,env(safe-area-inset-bottom))] lg:pb-0'
      }`}
    >
      {children}
    </div>
  );
}
