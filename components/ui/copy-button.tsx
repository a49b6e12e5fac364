'use client';

import { useState } from 'react';

export interface CopyButtonProps {
  text: string;
  /** What is copied, for the button's name: "leaf hash". */
  what: string;
}

export function CopyButton({ text, what }: CopyButtonProps) {
  const [state, setState] = useState<'ready' | 'copied' | 'refused'>('ready');
  const words = { ready: 'Copy', copied: 'Copied', refused: 'Select and copy by hand' }[state];

  // navigator.clipboard is absent over plain http; then only the words change, and the text beside it can be selected.
  async function copy() {
    try {
      await navigator.clipboard.writeText(text);
      setState('copied');
    } catch {
      setState('refused');
    }
  }

  return (
    <button
      type="button"
      onClick={copy}
      className="not-printed -my-2 inline-flex min-h-11 min-w-11 items-center px-1 text-[0.9375rem] font-medium text-petrol underline underline-offset-4"
    >
      <span aria-live="polite">{words}</span>
      <span className="sr-only"> {what}</span>
    </button>
  );
}
