import Link from 'next/link';
import { Plates } from '@/components/entry/plates';
import { platesOfPurchase } from '@/components/entry/entry-facts';
import { Said } from '@/components/entry/said';
import { SaidOfReceipts } from '@/components/entry/said-of-receipts';
import { ThreeTimes } from '@/components/entry/three-times';
import { Box, Boxes } from '@/components/ui/box';
import { Table } from '@/components/ui/table';
import { UserText } from '@/components/ui/user-text';
import { formatLocalMoment } from '@/lib/domain/instants';
import { formatMoney, isCurrency } from '@/lib/domain/money';
import { lotAmount } from '@/lib/domain/shelf';
import { formatAmount } from '@/lib/domain/units';
import type { Attachment, PartName, PurchaseLine } from '@/lib/evidence/format';
import { paths } from '@/lib/paths';
import type { ShelfLot } from '@/lib/services/read-shelf-lots';
import type { LotUse } from '@/lib/services/read-shelf-page';
import type { PurchaseView } from '@/lib/services/record-view';
import { leftWords } from './lot-list';
import { totalOf } from './shelf-line';

export interface ReceiptViewProps {
  purchase: PurchaseView;
  shelf: string;
  /** Those of this receipt; none of a struck one. */
  lots: ShelfLot[];
  uses: LotUse[];
  zone: string;
  /** An owner may black out parts of its pictures. */
  canBlackOut: boolean;
}

/** A sealed receipt: its plates, what was bought, what is left, and where it was used. */
export function ReceiptView({ purchase, shelf, lots, uses, zone, canBlackOut }: ReceiptViewProps) {
  const { body, supplier, sealedAt, tokens, author } = purchase;
  const attachments = platesOfPurchase(purchase);
  return (
    <>
      <Boxes columns={3} isOneColumnOnPhone label="The purchase">
        <Box
          label="Supplier"
          note={supplier?.address === undefined ? undefined : <UserText>{supplier.address}</UserText>}
        >
          <UserText>{supplier?.name ?? absentWords(purchase, 'supplier')}</UserText>
        </Box>
        <Box label="Bought" note="As the receipt says">
          {formatLocalMoment(body.boughtOn)}
        </Box>
        <Box label="Total" isMeasure>
          {totalOf(purchase) ?? absentWords(purchase, 'prices')}
        </Box>
      </Boxes>
      <div className="-mt-px">
        <ThreeTimes sealedAt={sealedAt} tokens={tokens} zone={zone} />
      </div>
      {attachments.length === 0 ? (
        <p className="tag mt-4">
          {absentWords(purchase, 'attachments') === 'Erased'
            ? 'Its pictures and papers were erased.'
            : 'No picture or paper is attached.'}
        </p>
      ) : (
        <div className="mt-6">
          <Plates
            attachments={attachments}
            zone={zone}
            file={(sha, kind) => paths.api.file(sha, kind, shelf)}
            label="Plates of the receipt"
            blackOut={canBlackOut ? (copy) => paths.shelfBlackOut(shelf, lineWith(purchase, copy), copy) : undefined}
          />
        </div>
      )}
      <section className="mt-8">
        <Table
          caption="Lines"
          columns={[
            { label: 'Product', isRowHead: true },
            { label: 'Grade or part number' },
            { label: 'Bought', isNumber: true },
            { label: 'Price', isNumber: true },
            { label: 'Left' },
          ]}
          rows={body.lines.map((line) => {
            const lot = lots.find((one) => one.line === line.line);
            return {
              key: line.line,
              cells: [
                <UserText key="product">{line.product}</UserText>,
                <UserText key="which">{whichWords(line)}</UserText>,
                boughtWords(line),
                priceOf(purchase, line.line),
                lot === undefined ? 'Struck' : leftWords(lot),
              ],
            };
          })}
        />
      </section>
      <section className="mt-8">
        <Table
          caption="Where it was used"
          emptyText="Nothing of it has been used yet."
          columns={[
            { label: 'Entry', isRowHead: true },
            { label: 'Machine' },
            { label: 'Product' },
            { label: 'Drawn', isNumber: true },
          ]}
          rows={uses.map((use, index) => ({
            key: index,
            isStruck: use.isStruck,
            cells: [
              <UseLink key="entry" use={use} />,
              <UserText key="machine">{use.machine?.name ?? 'A machine not shared with you'}</UserText>,
              <UserText key="product">{body.lines.find(({ line }) => line === use.line)?.product ?? ''}</UserText>,
              use.isStruck ? `${formatAmount(use)}, given back` : formatAmount(use),
            ],
          }))}
        />
      </section>
      <SaidOfReceipts purchases={[purchase]} zone={zone} />
      <Said notes={null} author={author} />
    </>
  );
}

/** The line of the shelf's log that holds a picture: the receipt itself, or what was sealed of it later. */
function lineWith({ seq, corrections }: PurchaseView, copy: string): number {
  const holds = (one: { attachments: Attachment[] }) => one.attachments.some((each) => each.copy?.sha256 === copy);
  return corrections.find(holds)?.seq ?? seq;
}

function UseLink({ use: { machine, seq } }: { use: LotUse }) {
  if (machine === null) return 'Not shown';
  return (
    <Link className="link" href={paths.entry(machine.id, seq)}>
      Entry {seq}
    </Link>
  );
}

function whichWords({ grade, standard, partNumber, batch }: PurchaseLine): string {
  return [grade, standard, partNumber, batch && `batch ${batch}`].filter(Boolean).join(', ') || 'Not stated';
}

function boughtWords(line: PurchaseLine): string {
  const { containers, containerSize } = line;
  if (containers === undefined || containerSize === undefined) return formatAmount(lotAmount(line));
  return containers === 1 ? formatAmount(containerSize) : `${containers} × ${formatAmount(containerSize)}`;
}

function priceOf({ prices, erasures }: PurchaseView, line: number): string {
  const price = prices?.lines.find((one) => one.line === line)?.price;
  return price !== undefined && prices && isCurrency(prices.currency)
    ? formatMoney(price, prices.currency)
    : absentWords({ erasures }, 'prices');
}

function absentWords({ erasures }: Pick<PurchaseView, 'erasures'>, part: PartName): string {
  return erasures?.some(({ name }) => name === part) === true ? 'Erased' : 'Not stated';
}
