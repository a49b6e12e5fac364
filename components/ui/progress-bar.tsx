import { useId } from 'react';

export interface ProgressBarProps {
  label: string;
  /** Without a value the bar says only that work is going on. */
  value?: number | undefined;
  max?: number;
  /** "3 of 7 photos": always in words too. */
  text?: string;
}

export function ProgressBar({ label, value, max = 1, text }: ProgressBarProps) {
  const id = useId();
  return (
    <div>
      <div className="mb-1.5 flex items-baseline justify-between gap-4">
        <label htmlFor={id} className="label">
          {label}
        </label>
        {text ? <span className="tag tabular-nums">{text}</span> : null}
      </div>
      <progress
        id={id}
        max={max}
        {...(value === undefined ? {} : { value })}
        className="block h-4 w-full appearance-none overflow-clip border border-ink bg-steel [&::-moz-progress-bar]:bg-petrol [&::-webkit-progress-bar]:bg-steel [&::-webkit-progress-value]:bg-petrol"
      />
    </div>
  );
}
