import { useId } from 'react';
import { Button } from '@/components/ui/button';
import { Checkbox } from '@/components/ui/checkbox';
import { FieldError } from '@/components/ui/field';
import { TextInput } from '@/components/ui/text-input';
import { UserText } from '@/components/ui/user-text';
import type { Openable } from '@/lib/services/what-can-be-opened';
import { choosable, isWithinFilters, type Line, type ScopeState } from './scope-state';

export interface ChooseEntriesProps {
  openable: Openable;
  state: ScopeState;
  change: (changed: Partial<ScopeState>) => void;
  errors: Record<string, string | undefined>;
}

/** Which entries are opened: by what was done, by period, and one by one; each narrows the others. */
export function ChooseEntries({ openable, state, change, errors }: ChooseEntriesProps) {
  const { items, from, to } = state;
  const lines = choosable(openable.lines).toReversed();
  const toggle = (item: string, isWanted: boolean) =>
    change({
      items: openable.items.map((one) => one.item).filter((one) => (one === item ? isWanted : items.includes(one))),
    });
  return (
    <>
      {openable.items.length === 0 ? null : (
        <fieldset>
          <legend className="label mb-1">By what was done</legend>
          <p className="tag">None ticked: whatever was done. Readings are closed once one is ticked.</p>
          <div className="grid gap-x-5 sm:grid-cols-2">
            {openable.items.map(({ item, title }) => (
              <Checkbox
                key={item}
                label={<UserText>{title}</UserText>}
                checked={items.includes(item)}
                onChange={(event) => toggle(item, event.target.checked)}
              />
            ))}
          </div>
        </fieldset>
      )}
      <fieldset>
        <legend className="label mb-1">By period</legend>
        <div className="grid grid-cols-2 gap-4">
          <TextInput
            label="Finished from"
            type="date"
            isOptional
            value={from}
            error={errors.from}
            onChange={(event) => change({ from: event.target.value })}
          />
          <TextInput
            label="Until"
            type="date"
            isOptional
            value={to}
            error={errors.to}
            onChange={(event) => change({ to: event.target.value })}
          />
        </div>
      </fieldset>
      <EntryTicks lines={lines} state={state} change={change} error={errors.entries} />
    </>
  );
}

function EntryTicks(
  props: { lines: Line[]; error: string | undefined } & Pick<ChooseEntriesProps, 'state' | 'change'>,
) {
  const { lines, state, change, error } = props;
  const errorId = useId();
  const toggle = (seq: number, isTicked: boolean) => {
    const unticked = new Set(state.unticked);
    if (isTicked) unticked.delete(seq);
    else unticked.add(seq);
    change({ unticked });
  };
  return (
    <fieldset>
      <legend className="label mb-1">Entry by entry, newest first</legend>
      <p className="tag">
        The opening, terms and strikes are always opened; addenda, countersignatures and signatures follow their entry.
        With all ticked, what you seal later is opened too; otherwise it stays withheld.
      </p>
      <div className="my-2 flex gap-2.5">
        <Button onClick={() => change({ unticked: new Set() })}>All</Button>
        <Button onClick={() => change({ unticked: new Set(lines.map(({ seq }) => seq)) })}>None</Button>
      </div>
      <FieldError id={errorId} error={error} />
      {/* A list that scrolls must be reachable by keyboard even where every box in it is disabled. */}
      <div
        tabIndex={0}
        role="group"
        aria-label="Entries"
        className="max-h-96 overflow-y-auto border border-line bg-sheet px-3"
      >
        {lines.map((line) => {
          const isKept = isWithinFilters(line, state);
          return (
            <Checkbox
              key={line.seq}
              label={
                <>
                  {line.seq} <UserText>{line.title}</UserText>, {line.on}
                  {isKept ? null : <span className="tag block">Left out by what was done or by the period</span>}
                </>
              }
              checked={isKept && !state.unticked.has(line.seq)}
              disabled={!isKept}
              onChange={(event) => toggle(line.seq, event.target.checked)}
            />
          );
        })}
      </div>
    </fieldset>
  );
}
