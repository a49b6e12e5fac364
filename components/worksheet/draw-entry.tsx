'use client';

import { useDraftInScreen, useDraftSet } from '@/components/garage/draft-context';
import { mintId } from '@/components/garage/mint-id';
import { Button } from '@/components/ui/button';
import type { Amount } from '@/lib/evidence/format';
import { localDateOf } from '@/lib/domain/instants';
import { hasLeft, proposeDraws, type Lot, type LotDraw } from '@/lib/domain/shelf';
import { compareAmounts, formatAmount, sumAmounts } from '@/lib/domain/units';
import { balanceLeft, drawnTotal, itemDraws, lotWords, stillWanted, suitableLots } from './draw-figures';
import { DrawLine } from './draw-line';
import { readAmount } from './fill-figures';
import { lotsBeside, useWorksheet } from './worksheet-context';

export interface DrawEntryProps {
  /** `tasks/<id>/fills/<id>` or `tasks/<id>/parts/<id>`. */
  item: string;
  kind: Lot['kind'];
  /** What is filled or fitted, as the spec sheet names it. */
  title: string;
  wanted: Amount | undefined;
  grade?: string;
  partNumbers?: readonly string[];
}

/** Where it came from: the oldest suitable lots are proposed, any other can be chosen, and no lot is an answer too. */
export function DrawEntry({ item, kind, title, wanted, grade, partNumbers }: DrawEntryProps) {
  const { worksheet, lots, machine } = useWorksheet();
  const draws = itemDraws(worksheet, item);
  const take = useTake(item, kind);
  const here = lotsBeside(lots, worksheet, item).filter((lot) => lot.kind === kind);
  const free = lotsBeside(lots, worksheet).filter((lot) => lot.kind === kind);
  const day = worksheet.finishedAt.date ?? localDateOf(new Date().toISOString(), machine?.timeZone ?? 'UTC');
  const drawn = wanted && drawnTotal(draws, wanted.unit);
  const left = wanted && stillWanted(wanted, drawn);
  const suitable = suitableLots(free, { title, ...(grade ? { grade } : {}), ...(partNumbers ? { partNumbers } : {}) });
  const proposed = left ? proposeDraws(suitable, left, day).draws : [];
  const others = left ? free.filter((lot) => hasLeft(lot) && !proposed.some((one) => one.lot.key === lot.key)) : [];
  const isOver = wanted && drawn && compareAmounts(drawn, wanted) > 0;
  return (
    <div className="border border-line bg-sheet p-3">
      <p className="label">From the shelf</p>
      {draws.map((draw) => (
        <DrawLine
          key={draw.id}
          path={`${item}/draws/${draw.id}`}
          lot={here.find(({ key }) => key === draw.lot)}
          lots={here}
          wanted={wanted}
        />
      ))}
      <p className={isOver ? 'tone-gap mt-1.5' : 'mt-1.5'} aria-live="polite">
        {balanceLeft({ wanted, drawn, lots: free.filter(hasLeft).length })}
      </p>
      {proposed.length > 0 ? (
        <Button size="big" isWide className="mt-2" onClick={() => take(proposed)}>
          Take {proposed.map(takeWords).join(' and ')}, {proposed[0]?.lot.product}
        </Button>
      ) : null}
      {left && others.length > 0 ? (
        <details className="mt-2">
          <summary className="flex min-h-14 items-center font-medium text-petrol underline underline-offset-4">
            {proposed.length > 0 ? 'From another lot' : 'Choose a lot'}
          </summary>
          <ul className="space-y-2">
            {others.map((lot) => (
              <li key={lot.key}>
                <Button size="big" isWide onClick={() => take(proposeDraws([lot], left, day).draws)}>
                  {lotWords(lot)}
                </Button>
              </li>
            ))}
          </ul>
        </details>
      ) : null}
    </div>
  );
}

const takeWords = ({ lot, amount, unit }: LotDraw) => `${formatAmount({ amount, unit })} from lot ${lot.seq}`;

/** Enters draws: a lot drawn from already gives more, and the first one names the product where nobody has. */
function useTake(item: string, kind: Lot['kind']): (proposed: readonly LotDraw[]) => void {
  const { worksheet } = useWorksheet();
  const { view } = useDraftInScreen();
  const setAll = useDraftSet();
  return (proposed) => {
    const draws = itemDraws(worksheet, item);
    const fields = proposed.flatMap(({ lot, amount, unit }, index): [string, string][] => {
      const same = draws.find((draw) => draw.lot === lot.key);
      const before = same && readAmount(same);
      const at = `${item}/draws/${same?.id ?? mintId()}`;
      const sum = before ? sumAmounts([before, { amount, unit }], unit) : { amount, unit };
      return [
        [`${at}/lot`, lot.key], [`${at}/amount`, sum.amount], [`${at}/unit`, sum.unit],
        ...(same ? [] : [[`${at}/position`, String(draws.length + index + 1)] as [string, string]]),
      ]; // prettier-ignore
    });
    const lot = proposed[0]?.lot;
    const named: [string, string][] = [];
    if (lot && kind === 'fluid' && !view.fields[`${item}/product`]) {
      named.push([`${item}/product`, lot.product]);
      if (lot.grade) named.push([`${item}/grade`, lot.grade]);
    }
    if (lot?.partNumber && kind === 'part' && !view.fields[`${item}/partNumber`]) {
      named.push([`${item}/partNumber`, lot.partNumber]);
    }
    setAll(Object.fromEntries([...fields, ...named]));
  };
}
