'use client';

import { useEffect, useId, useRef, type ReactNode } from 'react';
import { classes } from './classes';

export interface DialogProps {
  title: ReactNode;
  isOpen: boolean;
  /** Called for Escape and the close button alike; the caller then sets `isOpen` to false. */
  onClose: () => void;
  children: ReactNode;
  /** Buttons at the foot; they stay in sight while the text scrolls. */
  actions?: ReactNode;
  /** Fills the screen, for a hold point. */
  isFull?: boolean;
  closeText?: string;
}

/** The native dialog: it keeps the focus inside and gives it back by itself. */
export function Dialog({ title, isOpen, onClose, children, actions, isFull, closeText = 'Close' }: DialogProps) {
  const ref = useRef<HTMLDialogElement>(null);
  const titleId = useId();

  useEffect(() => {
    const dialog = ref.current;
    if (!dialog || dialog.open === isOpen) return;
    if (isOpen) dialog.showModal();
    else dialog.close();
  }, [isOpen]);

  return (
    <dialog
      ref={ref}
      aria-labelledby={titleId}
      onCancel={(event) => {
        event.preventDefault();
        onClose();
      }}
      className={classes(
        'flex-col border border-ink bg-paper text-ink open:flex backdrop:bg-[#0f1615]/60',
        isFull
          ? 'fixed inset-0 m-0 size-full max-h-none max-w-none border-0'
          : 'm-auto max-h-[calc(100dvh-2rem)] w-[min(36rem,calc(100vw-2rem))]',
      )}
    >
      <header className="flex items-start justify-between gap-4 border-b border-line px-4 py-3">
        <h2 id={titleId} className={classes('py-1.5', isFull ? 'text-3xl' : '')}>
          {title}
        </h2>
        <button
          type="button"
          onClick={onClose}
          className="min-h-11 shrink-0 px-2 font-medium text-petrol underline underline-offset-4"
        >
          {closeText}
        </button>
      </header>
      <div className="min-h-0 flex-auto overflow-y-auto px-4 py-4">{children}</div>
      {actions ? (
        <footer className="flex flex-wrap justify-end gap-2.5 border-t border-line px-4 py-3 pb-[max(0.75rem,env(safe-area-inset-bottom))]">
          {actions}
        </footer>
      ) : null}
    </dialog>
  );
}
