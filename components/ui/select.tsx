import type { ComponentPropsWithRef } from 'react';
import type { ControlSize } from './button';
import { classes } from './classes';
import { controlClasses, Field, type FieldProps } from './field';

export interface SelectOption {
  value: string;
  label: string;
  isDisabled?: boolean;
}

export type SelectProps = Omit<ComponentPropsWithRef<'select'>, 'size' | 'children'> &
  FieldProps & { options: SelectOption[]; size?: ControlSize | undefined };

export function Select({ label, hint, error, isOptional, id, className, size, options, ...rest }: SelectProps) {
  return (
    <Field {...{ label, hint, error, isOptional, id, className }}>
      {(control) => (
        <span className="relative block">
          <select
            {...rest}
            {...control}
            className={classes(
              controlClasses,
              'appearance-none pr-10',
              size === 'big' ? 'min-h-14 text-xl' : 'min-h-11',
            )}
          >
            {options.map((option) => (
              <option key={option.value} value={option.value} disabled={option.isDisabled}>
                {option.label}
              </option>
            ))}
          </select>
          <svg
            aria-hidden="true"
            viewBox="0 0 12 8"
            width="12"
            height="8"
            className="pointer-events-none absolute top-1/2 right-3.5 -translate-y-1/2 fill-none stroke-ink stroke-2"
          >
            <path d="M1 1.5 6 6.5 11 1.5" />
          </svg>
        </span>
      )}
    </Field>
  );
}
