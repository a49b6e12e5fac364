'use client';

import { useFormStatus } from 'react-dom';
import { Button, type ButtonProps } from './button';

export type SubmitButtonProps = Omit<ButtonProps, 'type' | 'isBusy'> & {
  /** What the button says while the server works, such as "Sealing". */
  busyText?: string;
};

/** Submits its form once: a second press while the first is on its way does nothing. */
export function SubmitButton({ busyText, children, ...rest }: SubmitButtonProps) {
  const { pending } = useFormStatus();
  return (
    <Button {...rest} type="submit" isBusy={pending}>
      {pending && busyText ? busyText : children}
    </Button>
  );
}
