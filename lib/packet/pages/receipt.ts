import 'server-only';
import { formatInstant, formatLocalDate, formatLocalMoment } from '@/lib/domain/instants';
import { formatAmount } from '@/lib/domain/units';
import type { PurchaseLine } from '@/lib/evidence/format';
import type { PurchaseView } from '@/lib/services/record-view';
import { receiptAnchor, receiptName, type PacketContent } from '../content';
import { drawBoxes } from '../sheet/boxes';
import { drawPlates } from '../sheet/plates';
import { types, type Sheet } from '../sheet/sheet';
import { drawTable } from '../sheet/table';
import { absentWord, drawStruck } from './later-words';
import { drawLeaf, provenCell } from './leaf';
import { platesOf } from './plates-of';

/** A purchase this machine's entries draw from: what was bought, when it was sealed, and the paper itself. */
export function drawReceipt(sheet: Sheet, purchase: PurchaseView, content: PacketContent): void {
  const { body, supplier, seq, usedBy } = purchase;
  const { zone } = content;
  const name = receiptName(purchase);
  const from = supplier === null ? `supplier ${absentWord(purchase.erasures, 'supplier')}` : supplier.name;
  sheet.during(`Receipt ${name}, continued`, () => {
    if (sheet.left < 330) sheet.newPage();
    else sheet.gap(26);
    sheet.anchor(receiptAnchor(purchase));
    sheet.layer.bookmark(`${name} ${from}, ${formatLocalDate(body.boughtOn.date)}`, 1, sheet.y - 6);
    sheet.paragraph(`Receipt ${name}, entry ${seq} of the shelf’s log`, types.label);
    sheet.paragraph(
      `${from}, ${formatLocalDate(body.boughtOn.date)}`,
      { ...types.h1, size: 17, leading: 19 },
      { tag: 'H2' },
    );
    sheet.gap(5);
    if (purchase.struckBy) drawStruck(sheet, purchase.struckBy, content, 'line');
    drawBoxes(sheet, 4, [
      { label: 'Bought, as the receipt says', value: formatLocalMoment(body.boughtOn), note: body.boughtOn.zone },
      { label: 'Sealed by this installation', value: formatInstant(purchase.sealedAt, zone), note: zone },
      provenCell(purchase.tokens, zone),
      { label: 'Used by entries', value: usedBy.length === 0 ? 'none' : usedBy.join(', ') },
      {
        label: 'Supplier',
        value:
          [supplier?.name, supplier?.address].filter(Boolean).join(', ') || absentWord(purchase.erasures, 'supplier'),
        span: 2,
      },
      {
        label: 'Prices',
        value: purchase.prices === null ? absentWord(purchase.erasures, 'prices') : 'in the attached record.json',
        note: purchase.attachments.length > 0 ? 'A picture of the receipt may show them.' : undefined,
      },
      { label: 'Sealed by', value: purchase.author?.name ?? absentWord(purchase.erasures, 'author') },
    ]);
    sheet.gap(4);
    drawLines(sheet, body.lines);
    drawSaidLater(sheet, purchase, content);
    const standing = purchase.corrections.filter(({ struckBy }) => struckBy === null);
    const pictures = [...purchase.attachments, ...standing.flatMap(({ attachments }) => attachments)];
    if (pictures.length > 0) {
      sheet.gap(10);
      drawPlates(sheet, platesOf(name, pictures, content));
    }
    drawLeaf(sheet, purchase, content);
  });
}

/** Corrections, blacked-out copies and erasures, each with its line of the shelf's log. */
function drawSaidLater(sheet: Sheet, { corrections }: PurchaseView, { zone }: PacketContent): void {
  if (corrections.length === 0) return;
  sheet.heading('Said later', { tag: 'H3', below: 44 });
  for (const { seq, sealedAt, why, struckBy } of corrections) {
    const struck = struckBy === null ? '' : `Struck by line ${struckBy.seq}, and still readable: `;
    const text = why === null ? 'Its text is withheld.' : `“${why}”`;
    sheet.paragraph(`${struck}${text} Line ${seq} of the shelf’s log, sealed ${formatInstant(sealedAt, zone)}.`);
    sheet.gap(3);
  }
}

function drawLines(sheet: Sheet, lines: PurchaseLine[]): void {
  drawTable(
    sheet,
    [
      { title: 'Line', share: 0.6 },
      { title: 'Product', share: 3.6 },
      { title: 'Grade, standard', share: 2.2 },
      { title: 'Part number, batch', share: 2.2 },
      { title: 'Bought', share: 2.2, type: types.strong },
    ],
    lines.map((line) => [
      String(line.line),
      line.product,
      [line.grade, line.standard].filter(Boolean).join(', '),
      [line.partNumber, line.batch === undefined ? undefined : `batch ${line.batch}`].filter(Boolean).join(', '),
      boughtWords(line),
    ]),
  );
}

function boughtWords({ containers, containerSize, quantity }: PurchaseLine): string {
  if (containers !== undefined && containerSize !== undefined) return `${containers} × ${formatAmount(containerSize)}`;
  return quantity === undefined ? 'not stated' : formatAmount({ amount: quantity, unit: '{piece}' });
}
