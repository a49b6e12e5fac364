'use client';

import { useEffect, type RefObject } from 'react';

/** Paper has nothing to unfold: every technical line is opened for printing, and closed again after it. */
export function usePrintOpen(within: RefObject<HTMLElement | null>): void {
  useEffect(() => {
    let opened: HTMLDetailsElement[] = [];
    const open = () => {
      const all = within.current?.querySelectorAll<HTMLDetailsElement>('details[data-technical]:not([open])');
      opened = [...(all ?? [])];
      for (const one of opened) one.open = true;
    };
    const close = () => {
      for (const one of opened) one.open = false;
    };
    window.addEventListener('beforeprint', open);
    window.addEventListener('afterprint', close);
    return () => {
      window.removeEventListener('beforeprint', open);
      window.removeEventListener('afterprint', close);
    };
  }, [within]);
}
