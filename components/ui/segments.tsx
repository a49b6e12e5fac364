import { useId, type ChangeEvent, type ReactNode } from 'react';
import type { ControlSize } from './button';
import { classes } from './classes';
import { FieldError, FieldHint } from './field';

export interface SegmentOption {
  value: string;
  label: ReactNode;
  /** A small drawing above the label, such as a debris grade. */
  picture?: ReactNode;
  isDisabled?: boolean;
}

export interface SegmentsProps {
  label: ReactNode;
  name: string;
  options: SegmentOption[];
  /** With `value` the caller keeps the choice; with `defaultValue` the form does. */
  value?: string | undefined;
  defaultValue?: string | undefined;
  onChange?: ((value: string) => void) | undefined;
  hint?: ReactNode | undefined;
  error?: string | undefined;
  size?: ControlSize | undefined;
  /** Stands beside a figure and needs no visible label. */
  isLabelHidden?: boolean | undefined;
  isWide?: boolean | undefined;
  className?: string | undefined;
}

/** One choice out of a few, by one tap: a radio group drawn as joined cells. */
export function Segments(props: SegmentsProps) {
  const { label, name, options, value, defaultValue, onChange, hint, error, size, isLabelHidden, isWide } = props;
  const id = useId();
  const describedBy = [hint ? `${id}-hint` : '', error ? `${id}-error` : ''].filter(Boolean).join(' ');
  const onPick = onChange && ((event: ChangeEvent<HTMLInputElement>) => onChange(event.target.value));
  return (
    <fieldset className={classes('min-w-0', props.className)} aria-describedby={describedBy || undefined}>
      <legend className={isLabelHidden ? 'sr-only' : 'label mb-1.5'}>{label}</legend>
      <div
        className={classes(
          'flex-wrap overflow-clip rounded-cut border-[1.5px] bg-sheet',
          error ? 'border-gap' : 'border-edge',
          isWide ? 'flex' : 'inline-flex max-w-full',
        )}
      >
        {options.map((option) => (
          <label
            key={option.value}
            className={classes(
              'relative -mr-px -mb-px flex flex-auto cursor-pointer flex-col items-center justify-center gap-1 border-r border-b border-hair',
              'px-3 py-1.5 text-center font-medium leading-tight',
              'has-checked:bg-petrol has-checked:text-petrol-ink has-disabled:cursor-not-allowed has-disabled:text-soft',
              'has-focus-visible:outline-3 has-focus-visible:-outline-offset-3 has-focus-visible:outline-petrol',
              'has-checked:has-focus-visible:outline-petrol-ink',
              // Forced colours drop the fill, so the checked cell keeps a thick outline of its own.
              'forced-colors:has-checked:border-4',
              size === 'big' ? 'min-h-14 text-lg' : 'min-h-11',
              isWide ? 'basis-0' : '',
            )}
          >
            <input
              type="radio"
              name={name}
              value={option.value}
              disabled={option.isDisabled}
              {...(value === undefined
                ? { defaultChecked: option.value === defaultValue }
                : { checked: option.value === value })}
              {...(onPick ? { onChange: onPick } : value === undefined ? {} : { readOnly: true })}
              className="absolute inset-0 size-full cursor-[inherit] appearance-none opacity-0"
            />
            {option.picture}
            <span>{option.label}</span>
          </label>
        ))}
      </div>
      <FieldError id={`${id}-error`} error={error} />
      <FieldHint id={`${id}-hint`} hint={hint} />
    </fieldset>
  );
}
