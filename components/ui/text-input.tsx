import type { ComponentPropsWithRef } from 'react';
import type { ControlSize } from './button';
import { classes } from './classes';
import { controlClasses, Field, type FieldProps } from './field';

export type TextInputProps = Omit<ComponentPropsWithRef<'input'>, 'size' | 'children'> &
  FieldProps & { size?: ControlSize | undefined };

/** One line of text in its field: e-mail, password, date, VIN … by `type`. */
export function TextInput({ label, hint, error, isOptional, id, className, size, ...rest }: TextInputProps) {
  return (
    <Field {...{ label, hint, error, isOptional, id, className }}>
      {(control) => (
        <input
          type="text"
          dir={rest.type === undefined || rest.type === 'text' ? 'auto' : undefined}
          {...rest}
          {...control}
          className={classes(controlClasses, size === 'big' ? 'min-h-14 text-xl' : 'min-h-11')}
        />
      )}
    </Field>
  );
}
