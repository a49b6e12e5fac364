import type { ComponentPropsWithRef, ReactNode } from 'react';
import type { ControlSize } from './button';
import { classes } from './classes';
import { controlClasses, Field, type FieldProps } from './field';
import { Segments } from './segments';

export interface UnitOption {
  /** UCUM code, as it goes into the record. */
  code: string;
  label: ReactNode;
}

export type NumberInputProps = Omit<ComponentPropsWithRef<'input'>, 'size' | 'type' | 'children' | 'inputMode'> &
  FieldProps & {
    size?: ControlSize | undefined;
    /** The one unit, when there is no choice. */
    unit?: string | undefined;
    /** Units to choose from by one tap; needs `unitName`. */
    units?: UnitOption[] | undefined;
    unitName?: string | undefined;
    unitValue?: string | undefined;
    defaultUnit?: string | undefined;
    onUnitChange?: ((code: string) => void) | undefined;
    isWhole?: boolean | undefined;
  };

/**
 * A figure as typed: a text field with the numeric keypad, never type=number, which would round, step under a scroll
 * wheel and drop what it cannot parse.
 */
export function NumberInput(props: NumberInputProps) {
  const { label, hint, error, isOptional, id, className, size, isWhole, ...others } = props;
  const { unit, units, unitName, unitValue, defaultUnit, onUnitChange, ...input } = others;
  const isBig = size === 'big';
  return (
    <div className={className}>
      <Field {...{ label: unit ? <UnitInLabel label={label} unit={unit} /> : label, hint, error, isOptional, id }}>
        {(control) => (
          <div className={classes('flex gap-2', isBig ? 'flex-col' : 'flex-wrap items-stretch')}>
            <span className={classes('relative block min-w-28', isBig ? '' : 'flex-1')}>
              <input
                autoComplete="off"
                {...input}
                type="text"
                inputMode={isWhole ? 'numeric' : 'decimal'}
                {...control}
                className={classes(
                  controlClasses,
                  'figure',
                  isBig ? 'min-h-16 text-[2.5rem]' : 'min-h-11 text-2xl',
                  unit ? (isBig ? 'pr-28' : 'pr-20') : '',
                )}
              />
              {unit ? (
                <span
                  aria-hidden="true"
                  className={classes(
                    'pointer-events-none absolute inset-y-0 right-3 flex items-center text-soft',
                    isBig ? 'text-2xl' : '',
                  )}
                >
                  {unit}
                </span>
              ) : null}
            </span>
            {units && unitName ? (
              <Segments
                label="Unit"
                isLabelHidden
                name={unitName}
                options={units.map(({ code, label: text }) => ({ value: code, label: text }))}
                value={unitValue}
                defaultValue={defaultUnit ?? units[0]?.code}
                onChange={onUnitChange}
                size={size}
                isWide={isBig}
              />
            ) : null}
          </div>
        )}
      </Field>
    </div>
  );
}

/** The unit drawn inside the box is hidden from screen readers, so the label says it. */
function UnitInLabel({ label, unit }: { label: NumberInputProps['label']; unit: string }) {
  return (
    <>
      {label}
      <span className="sr-only">, in {unit}</span>
    </>
  );
}
