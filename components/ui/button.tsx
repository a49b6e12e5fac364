import Link from 'next/link';
import type { ComponentPropsWithRef } from 'react';
import { classes } from './classes';

export type ButtonLook = 'plain' | 'main' | 'seal' | 'quiet';
export type ControlSize = 'plain' | 'big';

interface Looks {
  /** main: the one next step of a page. seal: only the act of sealing. quiet: underlined, for what is seldom used. */
  look?: ButtonLook | undefined;
  /** big (56 px) is for gloves. */
  size?: ControlSize | undefined;
  isWide?: boolean | undefined;
}

export type ButtonProps = ComponentPropsWithRef<'button'> & Looks & { isBusy?: boolean | undefined };
export type LinkButtonProps = ComponentPropsWithRef<typeof Link> & Looks;

const looks: Record<ButtonLook, string> = {
  plain: 'border-petrol text-petrol hover:bg-petrol hover:text-petrol-ink',
  main: 'border-petrol bg-petrol text-petrol-ink hover:bg-ink hover:border-ink hover:text-paper',
  seal: 'border-ink bg-petrol text-petrol-ink lacquer-edge pl-9 hover:bg-ink hover:text-paper',
  quiet: 'border-transparent text-petrol underline underline-offset-4 decoration-1 hover:decoration-2',
};

function buttonClasses({ look = 'plain', size = 'plain', isWide }: Looks, more?: string): string {
  return classes(
    'inline-flex items-center justify-center gap-2 rounded-cut border px-4 py-2 text-center font-semibold leading-tight',
    'disabled:cursor-not-allowed disabled:border-line disabled:bg-hair disabled:bg-none disabled:text-soft',
    'aria-disabled:cursor-not-allowed',
    size === 'big' ? 'min-h-14 text-lg' : 'min-h-11',
    isWide ? 'w-full' : '',
    looks[look],
    more,
  );
}

/** `isBusy` keeps the button focusable, so that the focus is not lost while the server answers. */
export function Button({ look, size, isWide, isBusy, className, onClick, ...rest }: ButtonProps) {
  const busy = isBusy
    ? ({ 'aria-disabled': true, onClick: (event: { preventDefault(): void }) => event.preventDefault() } as const)
    : onClick
      ? { onClick }
      : {};
  return <button type="button" {...rest} {...busy} className={buttonClasses({ look, size, isWide }, className)} />;
}

export function LinkButton({ look, size, isWide, className, ...rest }: LinkButtonProps) {
  return <Link {...rest} className={buttonClasses({ look, size, isWide }, className)} />;
}

/** An ordinary link that looks like a button: for what is no page of this application's router, such as the garage. */
export function AnchorButton({ look, size, isWide, className, ...rest }: ComponentPropsWithRef<'a'> & Looks) {
  return <a {...rest} className={buttonClasses({ look, size, isWide }, className)} />;
}
