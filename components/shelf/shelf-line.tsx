import { thumbOf } from '@/components/entry/record-ledger';
import { counted } from '@/components/entry/words';
import { LedgerLine } from '@/components/ledger/ledger-line';
import { UserText } from '@/components/ui/user-text';
import { formatLocalDate, localDateOf } from '@/lib/domain/instants';
import { formatMoney, isCurrency } from '@/lib/domain/money';
import { paths } from '@/lib/paths';
import type { PurchaseView, ShelfEntryView } from '@/lib/services/record-view';

export interface ShelfLineProps {
  entry: ShelfEntryView;
  shelf: string;
  zone: string;
}

const kindWords: Partial<Record<ShelfEntryView['kind'], string>> = {
  opening: 'Shelf opened',
  disposal: 'Disposal',
  correction: 'Correction',
  strike: 'Strike',
  handover: 'Handover',
};

export function shelfEntryTitle({ kind, purchase, refersTo }: ShelfEntryView): string {
  if (purchase !== undefined) return purchase.supplier?.name ?? withoutSupplier(purchase);
  const of = refersTo ? ` of line ${refersTo.seq}` : '';
  return `${kindWords[kind] ?? kind}${of}`;
}

function withoutSupplier({ erasures, withheld }: PurchaseView): string {
  if (erasures?.some(({ name }) => name === 'supplier')) return 'Receipt, supplier erased';
  return withheld?.includes('supplier') ? 'Receipt, supplier withheld' : 'Receipt, supplier not stated';
}

/** What a line that is no purchase says: why something was disposed of, corrected or struck. */
export function saidOf({ body }: ShelfEntryView): string {
  const said = (body ?? {}) as { reason?: unknown; why?: unknown };
  const text = said.reason ?? said.why;
  return typeof text === 'string' ? text : '';
}

export function totalOf({ prices }: PurchaseView): string | undefined {
  return prices?.total !== undefined && isCurrency(prices.currency)
    ? formatMoney(prices.total, prices.currency)
    : undefined;
}

export function shelfEntryState({ struckBy, tokens }: ShelfEntryView): 'struck' | 'waiting' | 'sealed' {
  if (struckBy) return 'struck';
  return tokens.length === 0 ? 'waiting' : 'sealed';
}

/** One line of a shelf's log: a receipt with its pictures, or something quieter. */
export function ShelfLine({ entry, shelf, zone }: ShelfLineProps) {
  const { seq, purchase, leafHash, sealedAt, struckBy } = entry;
  const said = purchase === undefined ? saidOf(entry) : productsOf(purchase);
  const on = purchase?.body.boughtOn.date ?? localDateOf(sealedAt, zone);
  const state = shelfEntryState(entry);
  return (
    <LedgerLine
      seq={seq}
      href={paths.shelfEntry(shelf, seq)}
      date={formatLocalDate(on)}
      dateTime={on}
      odometer={purchase && totalOf(purchase)}
      title={<UserText>{shelfEntryTitle(entry)}</UserText>}
      detail={
        struckBy ? (
          <>
            Struck by line {struckBy.seq}: <UserText>{struckBy.reason}</UserText>
          </>
        ) : (
          <UserText>{said}</UserText>
        )
      }
      thumbs={purchase?.attachments.flatMap((one) => thumbOf(one, (sha, kind) => paths.api.file(sha, kind, shelf)))}
      mark={{ state, leafHash }}
      words={state === 'waiting' ? 'stamp to come' : state}
      wordsTone={state === 'waiting' ? 'warn' : 'soft'}
      isStruck={state === 'struck'}
      isQuiet={purchase === undefined}
    />
  );
}

const productsShown = 3;

function productsOf({ body }: PurchaseView): string {
  const names = body.lines.map(({ product }) => product);
  const more = names.length - productsShown;
  return more > 0
    ? `${names.slice(0, productsShown).join(', ')} and ${counted(more, 'more', 'more')}`
    : names.join(', ');
}
