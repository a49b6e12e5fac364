import type { ReactNode } from 'react';

/** What every part of the form is given: what was typed before, and what was refused. */
export interface PartProps {
  typed: Record<string, string>;
  fields: Record<string, string>;
}

/** One frame of the form: its title, and its fields in two columns on a desk. */
export function FormPart({ title, note, children }: { title: string; note?: string; children: ReactNode }) {
  return (
    <fieldset className="border border-line bg-sheet px-4 pt-3 pb-5">
      <legend className="sr-only">{title}</legend>
      <h2 aria-hidden="true">{title}</h2>
      {note ? <p className="tag mt-1 max-w-[70ch]">{note}</p> : null}
      <div className="mt-4 grid gap-x-6 gap-y-5 md:grid-cols-2">{children}</div>
    </fieldset>
  );
}
