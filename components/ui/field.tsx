import { useId, type ReactNode } from 'react';
import { classes } from './classes';

/** What the control inside a field must carry, so that label, hint and error belong to it. */
export interface FieldControl {
  id: string;
  'aria-describedby': string | undefined;
  'aria-invalid': true | undefined;
}

export interface FieldProps {
  label: ReactNode;
  /** Says what is wanted, before anything is typed. */
  hint?: ReactNode | undefined;
  /** A sentence: what is wrong and what to do. */
  error?: string | undefined;
  isOptional?: boolean | undefined;
  id?: string | undefined;
  className?: string | undefined;
}

/** Owns label, hint, error and their ARIA for one control. */
export function Field({
  label,
  hint,
  error,
  isOptional,
  id: givenId,
  className,
  children,
}: FieldProps & { children: (control: FieldControl) => ReactNode }) {
  const madeId = useId();
  const id = givenId ?? madeId;
  const describedBy = [hint ? `${id}-hint` : '', error ? `${id}-error` : ''].filter(Boolean).join(' ');
  return (
    <div className={classes('min-w-0', className)}>
      <label htmlFor={id} className="label mb-1.5">
        {label}
        {isOptional ? ' (optional)' : null}
      </label>
      {children({ id, 'aria-describedby': describedBy || undefined, 'aria-invalid': error ? true : undefined })}
      <FieldError id={`${id}-error`} error={error} />
      <FieldHint id={`${id}-hint`} hint={hint} />
    </div>
  );
}

export function FieldHint({ id, hint }: { id: string; hint: ReactNode }) {
  if (!hint) return null;
  return (
    <p id={id} className="tag mt-1.5">
      {hint}
    </p>
  );
}

/** Always in the page, so that a screen reader hears the sentence when it arrives. */
export function FieldError({ id, error }: { id: string; error: string | undefined }) {
  return (
    <p id={id} aria-live="polite" className={error ? 'tone-gap mt-1.5 text-[0.9375rem] leading-snug' : 'sr-only'}>
      {error}
    </p>
  );
}

/** The outline every typed-in control shares. */
export const controlClasses =
  'block w-full min-w-0 rounded-cut border-[1.5px] border-edge bg-sheet px-3 text-ink ' +
  'focus-visible:border-petrol aria-invalid:border-gap aria-invalid:border-2 ' +
  'disabled:border-line disabled:text-soft read-only:bg-paper';
