'use client';

import { useEffect, useId, useRef, useState } from 'react';
import { Segments } from '@/components/ui/segments';
import { scopeEffect } from '@/lib/domain/scope-effect';
import type { Openable } from '@/lib/services/what-can-be-opened';
import { ChooseEntries } from './choose-entries';
import { ChooseParts } from './choose-parts';
import { ScopeSentence } from './scope-sentence';
import { fieldsOfState, firstState, scopeOfState, type ScopeState } from './scope-state';

export interface ScopeChoiceProps {
  openable: Openable;
  /** The page that shows what a reader would see. */
  preview: string;
  /** Sentences of the server about these fields. */
  errors: Record<string, string | undefined>;
}

const choices = [
  { value: 'usual', label: 'Everything but prices' },
  { value: 'for-sale', label: 'For sale: without names, VIN and prices' },
  { value: 'choose', label: 'Choose' },
];

/** What a packet or a viewing link opens: three choices, and under the third by entry, by work, by period, by part. */
export function ScopeChoice({ openable, preview, errors }: ScopeChoiceProps) {
  const [state, setState] = useState<ScopeState>(firstState);
  const { anchor, round } = useFormResets();
  const sentence = useId();
  const change = (changed: Partial<ScopeState>) => setState((before) => ({ ...before, ...changed }));
  const fields = fieldsOfState(state, openable.lines);
  const effect = scopeEffect(scopeOfState(state, openable.lines), openable.lines, openable.purchases);
  const query = new URLSearchParams({ opens: state.opens, ...fields });
  return (
    <div ref={anchor} key={round} className="grid gap-4">
      <Segments
        label="What it opens"
        name="opens"
        options={choices}
        value={state.opens}
        onChange={(opens) => change({ opens: opens as ScopeState['opens'] })}
        error={errors.opens}
      />
      {Object.entries(fields).map(([name, value]) => (
        <input key={name} type="hidden" name={name} value={value} />
      ))}
      {state.opens === 'choose' ? (
        <div className="grid gap-6 border-l-4 border-l-line pl-4" aria-describedby={sentence}>
          <ChooseEntries openable={openable} state={state} change={change} errors={errors} />
          <ChooseParts closed={state.closed} change={change} error={errors.closed} />
        </div>
      ) : null}
      <ScopeSentence id={sentence} effect={effect} preview={`${preview}?${query.toString()}`} />
    </div>
  );
}

/**
 * React empties a form once its action is done: boxes then look unticked while the choice still stands. Drawing them
 * anew shows what stands.
 */
function useFormResets() {
  const anchor = useRef<HTMLDivElement>(null);
  const [round, setRound] = useState(0);
  useEffect(() => {
    const form = anchor.current?.closest('form');
    const redraw = () => setRound((before) => before + 1);
    form?.addEventListener('reset', redraw);
    return () => form?.removeEventListener('reset', redraw);
  }, []);
  return { anchor, round };
}
