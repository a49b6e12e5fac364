import { useId } from 'react';
import { Checkbox } from '@/components/ui/checkbox';
import { FieldError } from '@/components/ui/field';
import { closedChoices, type ClosedChoice } from '@/lib/domain/scope';
import type { ScopeState } from './scope-state';

const labels: Record<ClosedChoice, { label: string; hint?: string }> = {
  prices: { label: 'Prices' },
  supplier: { label: 'Suppliers of what was bought' },
  names: { label: 'Names of people', hint: 'An entry whose text spells out a full name stays closed with them.' },
  vin: { label: 'VIN, frame and engine number', hint: 'An entry whose text spells one out stays closed with them.' },
  notes: { label: 'Notes' },
  pictures: { label: 'Photos of the work' },
  'receipt-pictures': {
    label: 'Pictures of receipts, work orders and other papers',
    hint: 'They show prices and often a name.',
  },
};

export interface ChoosePartsProps {
  closed: readonly ClosedChoice[];
  change: (changed: Partial<ScopeState>) => void;
  error: string | undefined;
}

/** Which parts stay closed on every entry that is opened. */
export function ChooseParts({ closed, change, error }: ChoosePartsProps) {
  const errorId = useId();
  const toggle = (choice: ClosedChoice, isClosed: boolean) =>
    change({ closed: closedChoices.filter((one) => (one === choice ? isClosed : closed.includes(one))) });
  return (
    <fieldset>
      <legend className="label mb-1">Keep closed</legend>
      {closedChoices.map((choice) => (
        <Checkbox
          key={choice}
          label={labels[choice].label}
          hint={labels[choice].hint}
          checked={closed.includes(choice)}
          onChange={(event) => toggle(choice, event.target.checked)}
        />
      ))}
      <FieldError id={errorId} error={error} />
    </fieldset>
  );
}
