'use client';

import { useDraftInScreen } from '@/components/garage/draft-context';
import { DraftFigure, DraftSelect, RemoveItem } from '@/components/garage/draft-fields';
import type { Amount } from '@/lib/evidence/format';
import type { Lot } from '@/lib/domain/shelf';
import { formatAmount, units, unitsOf } from '@/lib/domain/units';
import { lotWords } from './draw-figures';
import { pourSentence, readAmount } from './fill-figures';

interface DrawLineProps {
  path: string;
  lot: Lot | undefined;
  lots: readonly Lot[];
  wanted: Amount | undefined;
}

/** One draw: its lot in words, what to pour, and the way to correct it. */
export function DrawLine({ path, lot, lots, wanted }: DrawLineProps) {
  const { view } = useDraftInScreen();
  const unit = lot?.unit ?? '{piece}';
  const amount = view.fields[`${path}/amount`];
  const drawn = readAmount({ ...(amount ? { amount } : {}), unit: lotUnit(view.fields[`${path}/unit`], unit) });
  const sentence = lot && wanted && amount === wanted.amount ? pourSentence(wanted, lot) : undefined;
  return (
    <div className="mt-2 border-b border-hair pb-2">
      <p className="text-lg font-medium">{lot ? lotWords(lot, drawn) : 'A lot that is not on this phone'}</p>
      {sentence ? <p className="tag">{sentence}</p> : null}
      <details className="mt-1">
        <summary className="flex min-h-11 items-center font-medium text-petrol underline underline-offset-4">
          {drawn ? `${formatAmount(drawn)} from it: change` : 'Change'}
        </summary>
        <div className="mt-2 space-y-3">
          <DraftSelect
            path={`${path}/lot`}
            label="Lot"
            options={[
              { value: '', label: 'Choose a lot' },
              ...lots.map((one) => ({ value: one.key, label: lotWords(one) })),
            ]}
          />
          <DraftFigure
            path={`${path}/amount`}
            unitPath={`${path}/unit`}
            usualUnit={unit}
            offered={unitsOf(units[unit].dimension).filter(
              (code) => code === unit || code === wanted?.unit || code === 'mL',
            )}
            label="Taken from it"
          />
          <RemoveItem path={path}>Not from this lot</RemoveItem>
        </div>
      </details>
    </div>
  );
}

function lotUnit(kept: string | undefined, fallback: Lot['unit']): Lot['unit'] {
  return kept !== undefined && kept in units ? (kept as Lot['unit']) : fallback;
}
