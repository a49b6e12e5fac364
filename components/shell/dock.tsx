import type { ReactNode } from 'react';

/** The page's main actions: above the bottom bar on a phone, in the run of the page on a desk. */
export function Dock({ children }: { children: ReactNode }) {
  return (
    <div className="not-printed fixed inset-x-0 bottom-[calc(3.5rem+env(safe-area-inset-bottom))] z-10 flex gap-2.5 border-t border-line bg-paper px-4 py-3 *:flex-1 lg:static lg:mt-6 lg:border-0 lg:px-0 lg:*:flex-none">
      {children}
    </div>
  );
}
