import type { ComponentPropsWithRef } from 'react';
import { classes } from './classes';
import { controlClasses, Field, type FieldProps } from './field';

export type TextareaProps = Omit<ComponentPropsWithRef<'textarea'>, 'children'> & FieldProps;

export function Textarea({ label, hint, error, isOptional, id, className, rows = 3, ...rest }: TextareaProps) {
  return (
    <Field {...{ label, hint, error, isOptional, id, className }}>
      {(control) => (
        <textarea dir="auto" {...rest} rows={rows} {...control} className={classes(controlClasses, 'py-2.5')} />
      )}
    </Field>
  );
}
