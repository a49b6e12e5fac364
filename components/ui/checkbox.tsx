import { useId, type ComponentPropsWithRef, type ReactNode } from 'react';
import type { ControlSize } from './button';
import { classes } from './classes';
import { FieldError, FieldHint } from './field';

export type CheckboxProps = Omit<ComponentPropsWithRef<'input'>, 'type' | 'size' | 'children'> & {
  label: ReactNode;
  hint?: ReactNode | undefined;
  error?: string | undefined;
  size?: ControlSize | undefined;
};

export function Checkbox({ label, hint, error, size, id: givenId, className, ...rest }: CheckboxProps) {
  const madeId = useId();
  const id = givenId ?? madeId;
  const describedBy = [hint ? `${id}-hint` : '', error ? `${id}-error` : ''].filter(Boolean).join(' ');
  return (
    <div className={className}>
      <label
        className={classes(
          'flex cursor-pointer items-center gap-3 py-1',
          size === 'big' ? 'min-h-14 text-lg' : 'min-h-11',
        )}
      >
        <span className="relative block size-7 shrink-0">
          <input
            {...rest}
            type="checkbox"
            id={id}
            aria-describedby={describedBy || undefined}
            aria-invalid={error ? true : undefined}
            className="peer block size-7 cursor-pointer appearance-none rounded-cut border-[1.5px] border-edge bg-sheet checked:border-petrol checked:bg-petrol aria-invalid:border-2 aria-invalid:border-gap forced-colors:appearance-auto"
          />
          <svg
            aria-hidden="true"
            viewBox="0 0 28 28"
            className="pointer-events-none absolute inset-0 hidden size-7 fill-none stroke-petrol-ink stroke-3 peer-checked:block"
          >
            <path d="M7 14.5 12 19.5 21.5 8.5" />
          </svg>
        </span>
        <span className="leading-snug">{label}</span>
      </label>
      <FieldError id={`${id}-error`} error={error} />
      <FieldHint id={`${id}-hint`} hint={hint} />
    </div>
  );
}
