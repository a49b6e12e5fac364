import Link from 'next/link';
import { Sheet } from '@/components/ui/box';
import { classes } from '@/components/ui/classes';
import { UserText } from '@/components/ui/user-text';
import { formatLocalDate } from '@/lib/domain/instants';
import { convert, formatAmount } from '@/lib/domain/units';
import { paths } from '@/lib/paths';
import type { ShelfLot } from '@/lib/services/read-shelf-lots';

export interface LotListProps {
  lots: ShelfLot[];
  shelf: string;
  label: string;
}

/** `2 of 6 US qt left`; both figures with their units where those differ. */
export function leftWords({ balance, bought }: ShelfLot): string {
  if (balance.amount === '0') return `Nothing left of ${formatAmount(bought)}`;
  if (balance.amount === bought.amount && balance.unit === bought.unit) return `All ${formatAmount(bought)} left`;
  return balance.unit === bought.unit
    ? `${balance.amount} of ${formatAmount(bought)} left`
    : `${formatAmount(balance)} of ${formatAmount(bought)} left`;
}

/** Only drawn, so a plain number will do. */
function share({ balance, bought }: ShelfLot): number {
  const left = convert(balance.amount, balance.unit, bought.unit).div(bought.amount).toNumber();
  return Math.min(100, Math.max(0, left * 100));
}

/** Lots with what is left of each, written on a bar as long as that. */
export function LotList({ lots, shelf, label }: LotListProps) {
  return (
    <Sheet>
      <ul aria-label={label} className="divide-y divide-hair">
        {lots.map((lot) => (
          <li
            key={lot.key}
            className="relative grid gap-x-6 gap-y-2 px-4 py-3 hover:bg-paper has-focus-visible:bg-paper md:grid-cols-[minmax(0,1fr)_minmax(14rem,22rem)] md:items-center"
          >
            <div className="min-w-0">
              <p className="font-semibold">
                <Link
                  href={paths.shelfEntry(shelf, lot.seq)}
                  className="underline-offset-4 decoration-1 after:absolute after:inset-0 hover:underline"
                >
                  <UserText>{lot.product}</UserText>
                </Link>
              </p>
              <p className="tag">
                <UserText>{[lot.grade, lot.standard, lot.partNumber].filter(Boolean).join(', ')}</UserText>
                {lot.grade || lot.standard || lot.partNumber ? '; ' : ''}
                lot {lot.seq}, bought {formatLocalDate(lot.boughtOn.date)}
                {lot.supplier === undefined ? null : (
                  <>
                    {' '}
                    at <UserText>{lot.supplier}</UserText>
                  </>
                )}
              </p>
            </div>
            <p className="relative border border-edge bg-sheet px-3 py-1.5 font-medium tabular-nums">
              <span
                aria-hidden="true"
                className={classes('absolute inset-y-0 left-0 border-edge bg-steel', share(lot) < 100 && 'border-r')}
                style={{ width: `${share(lot)}%` }}
              />
              <span className="relative">{leftWords(lot)}</span>
            </p>
          </li>
        ))}
      </ul>
    </Sheet>
  );
}
