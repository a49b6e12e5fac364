import { UserText } from '@/components/ui/user-text';
import { formatInstant } from '@/lib/domain/instants';
import type { PurchaseView } from '@/lib/services/record-view';

/** What later lines of a shelf's log say of receipts: that one is struck, corrected, blacked out or erased in part. */
export function SaidOfReceipts({ purchases, zone }: { purchases: PurchaseView[]; zone: string }) {
  const said = purchases.flatMap(({ log, seq, struckBy, corrections }) => [
    ...corrections.map((one) => ({ ...one, key: `${log} ${one.seq}`, about: seq, text: one.why })),
    ...(struckBy
      ? [{ ...struckBy, key: `${log} ${struckBy.seq}`, about: seq, text: struckBy.reason || null, struckBy: null }]
      : []),
  ]);
  if (said.length === 0) return null;
  const isStrike = (one: (typeof said)[number]) => 'reason' in one;
  return (
    <section className="mt-8">
      <h2 className="mb-3">Said later of {purchases.length === 1 ? 'the receipt' : 'its receipts'}</h2>
      <ul className="grid gap-2.5">
        {said.map((one) => (
          <li key={one.key} className="kept-together border border-line bg-sheet px-4 py-3">
            <p className="label">
              Receipt {one.about}, line {one.seq} of the shelf’s log, sealed {formatInstant(one.sealedAt, zone)}
            </p>
            <p className={isStrike(one) ? 'tone-gap mt-1' : 'mt-1 max-w-[70ch]'}>
              {isStrike(one) ? 'Struck: ' : null}
              {one.struckBy === null ? null : `Struck by line ${one.struckBy.seq}, and still readable: `}
              {one.text === null ? 'its text is withheld.' : <Text text={one.text} isStruck={one.struckBy !== null} />}
            </p>
          </li>
        ))}
      </ul>
    </section>
  );
}

function Text({ text, isStruck }: { text: string; isStruck: boolean }) {
  const words = <UserText isMultiline>{text}</UserText>;
  return isStruck ? <s className="text-soft">{words}</s> : words;
}
