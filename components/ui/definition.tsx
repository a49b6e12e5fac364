import type { ReactNode } from 'react';
import { toneClasses, type Tone } from './box';
import { classes } from './classes';

export interface DefinitionItem {
  term: ReactNode;
  detail: ReactNode;
  tone?: Tone;
}

export interface DefinitionProps {
  items: DefinitionItem[];
  label?: string;
}

/** Terms and what is so, one to a row: reader's checks, particulars. Cells are for measurements; use `Boxes` there. */
export function Definition({ items, label }: DefinitionProps) {
  return (
    <dl aria-label={label} className="border-t border-line">
      {items.map((item, index) => (
        <div key={index} className="gap-6 border-b border-line py-2 sm:grid sm:grid-cols-[minmax(10rem,2fr)_3fr]">
          <dt className="text-soft">{item.term}</dt>
          <dd className={classes('min-w-0', toneClasses[item.tone ?? 'plain'])}>{item.detail}</dd>
        </div>
      ))}
    </dl>
  );
}
