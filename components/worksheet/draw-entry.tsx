'use client';

import { useDraftInScreen, useDraftSet } from '@/components/garage/draft-context';
import { DraftFigure, DraftSelect, RemoveItem } from '@/components/garage/draft-fields';
import { mintId } from '@/components/garage/mint-id';
import { Button } from '@/components/ui/button';
import type { Amount } from '@/lib/evidence/format';
import { localDateOf } from '@/lib/domain/instants';
import { hasLeft, proposeDraws, type Lot } from '@/lib/domain/shelf';
import { compareAmounts, formatAmount, units, unitsOf } from '@/lib/domain/units';
import { balanceLeft, drawnTotal, itemDraws, lotWords, suitableLots } from './draw-figures';
import { pourSentence, readAmount } from './fill-figures';
import { lotsBeside, useWorksheet } from './worksheet-context';

export interface DrawEntryProps {
  /** `tasks/<id>/fills/<id>` or `tasks/<id>/parts/<id>`. */
  item: string;
  kind: Lot['kind'];
  wanted: Amount | undefined;
  grade?: string;
  partNumbers?: readonly string[];
}

/** Where it came from: the oldest suitable lots are proposed, others can be chosen, and no lot is an answer too. */
export function DrawEntry({ item, kind, wanted, grade, partNumbers }: DrawEntryProps) {
  const { worksheet, lots, machine } = useWorksheet();
  const { view } = useDraftInScreen();
  const setAll = useDraftSet();
  const draws = itemDraws(worksheet, item);
  const here = lotsBeside(lots, worksheet, item).filter((lot) => lot.kind === kind);
  const day = worksheet.finishedAt.date ?? localDateOf(new Date().toISOString(), machine?.timeZone ?? 'UTC');
  const suitable = suitableLots(here, { ...(grade ? { grade } : {}), ...(partNumbers ? { partNumbers } : {}) });
  const proposal = wanted && proposeDraws(suitable, wanted, day);
  const drawn = wanted && drawnTotal(draws, wanted.unit);
  const isCovered = wanted && drawn && compareAmounts(drawn, wanted) === 0;

  function take() {
    const old = draws.map((draw): [string, string] => [`${item}/draws/${draw.id}/removed`, 'yes']);
    const added = (proposal?.draws ?? []).flatMap(({ lot, amount, unit }, index): [string, string][] => {
      const at = `${item}/draws/${mintId()}`;
      return [
        [`${at}/lot`, lot.key], [`${at}/amount`, amount], [`${at}/unit`, unit], [`${at}/position`, String(index + 1)],
      ]; // prettier-ignore
    });
    const lot = proposal?.draws[0]?.lot;
    const named: [string, string][] = [];
    if (lot && kind === 'fluid' && !view.fields[`${item}/product`]) {
      named.push([`${item}/product`, lot.product]);
      if (lot.grade) named.push([`${item}/grade`, lot.grade]);
    }
    if (lot?.partNumber && kind === 'part' && !view.fields[`${item}/partNumber`]) {
      named.push([`${item}/partNumber`, lot.partNumber]);
    }
    setAll(Object.fromEntries([...old, ...added, ...named]));
  }

  return (
    <div className="border border-line bg-sheet p-3">
      <p className="label">From the shelf</p>
      {draws.map((draw) => {
        const lot = here.find(({ key }) => key === draw.lot);
        return <DrawLine key={draw.id} path={`${item}/draws/${draw.id}`} lot={lot} lots={here} wanted={wanted} />;
      })}
      <p className="mt-1.5" aria-live="polite">
        {balanceLeft({ wanted, drawn, suitable: suitable.filter(hasLeft).length })}
      </p>
      {proposal && proposal.draws.length > 0 && !isCovered ? (
        <Button size="big" isWide className="mt-2" onClick={take}>
          Take{' '}
          {proposal.draws
            .map(({ lot, amount, unit }) => `${formatAmount({ amount, unit })} from lot ${lot.seq}`)
            .join(', ')}
        </Button>
      ) : null}
    </div>
  );
}

interface DrawLineProps {
  path: string;
  lot: Lot | undefined;
  lots: readonly Lot[];
  wanted: Amount | undefined;
}

function DrawLine({ path, lot, lots, wanted }: DrawLineProps) {
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
