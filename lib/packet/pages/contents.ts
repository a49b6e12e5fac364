import 'server-only';
import { formatLocalDate } from '@/lib/domain/instants';
import { entryAnchor, purchasesOf, receiptAnchor, receiptName, type PacketContent } from '../content';
import { colours } from '../layer/colours';
import { breakLines } from '../layer/shaping';
import { edges, types, type Sheet, type TextType } from '../sheet/sheet';

/** Every part, entry and receipt with its page. */
export function drawContents(sheet: Sheet, { record }: PacketContent): void {
  sheet.during('Contents, continued', () => {
    sheet.newPage();
    sheet.layer.bookmark('Contents', 0, sheet.y);
    sheet.paragraph('Contents', types.h1, { tag: 'H1' });
    sheet.gap(8);
    sheet.layer.tag('TOC', () => {
      drawPart(sheet, 'Machine and terms', 'terms');
      drawPart(sheet, 'Ledger', 'ledger');
      drawPart(sheet, 'Entries', 'entries');
      for (const { seq, title, struckBy } of record.entries) {
        drawItem(sheet, String(seq), `${title}${struckBy === null ? '' : ' (struck)'}`, entryAnchor(seq));
      }
      const purchases = purchasesOf(record);
      if (purchases.length > 0) drawPart(sheet, 'Receipts', 'receipts');
      for (const purchase of purchases) {
        const words = `${purchase.supplier?.name ?? 'Supplier withheld'}, ${formatLocalDate(purchase.body.boughtOn.date)}`;
        drawItem(sheet, receiptName(purchase), words, receiptAnchor(purchase));
      }
      drawPart(sheet, 'How to check this packet', 'verification');
    });
  });
}

function drawPart(sheet: Sheet, title: string, anchor: string): void {
  sheet.gap(5);
  drawLine(sheet, title, anchor, types.strong, edges.left);
}

function drawItem(sheet: Sheet, number: string, title: string, anchor: string): void {
  const first = breakLines(title, types.body.face, types.body.size, edges.right - edges.left - 90);
  const shown = first.length > 1 ? `${first[0]} …` : (first[0] ?? '');
  drawLine(sheet, shown, anchor, types.body, edges.left + 38, number);
}

function drawLine(sheet: Sheet, title: string, anchor: string, type: TextType, x: number, number?: string): void {
  sheet.room(type.leading + 2);
  sheet.layer.tag('TOCI', () => {
    if (number !== undefined)
      sheet.lineAt(number, edges.left + 30, sheet.y, { ...type, colour: colours.soft }, 'right');
    sheet.lineAt(title, x, sheet.y, type);
    sheet.lateAt(() => sheet.pageOf(anchor), edges.right, sheet.y, type, 'right');
  });
  sheet.y += type.leading + 2;
  sheet.layer.line(x, sheet.y - 1, edges.right, sheet.y - 1, { stroke: colours.hair, width: 0.5 });
}
