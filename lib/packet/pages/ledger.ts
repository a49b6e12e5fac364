import 'server-only';
import { checkTitle } from '@/lib/domain/checks';
import { formatLocalDate, localDateOf } from '@/lib/domain/instants';
import type { EntryView } from '@/lib/services/record-view';
import { entryAnchor, isService, type PacketContent } from '../content';
import { colours } from '../layer/colours';
import { breakLines } from '../layer/shaping';
import { drawMark, markWords } from '../sheet/mark';
import { edges, types, type Sheet } from '../sheet/sheet';
import { counted, odometerWords } from '../words';

const at = { number: edges.left, date: edges.left + 26, odometer: edges.left + 104, what: edges.left + 176 };
const markRight = edges.right - 54;
const markSize = 36;
/** The whole title stands on the entry's own page. */
const mostLines = 4;

/** Every entry of the record as a ledger line: number, date, odometer, what, mark with its words, page. */
export function drawLedger(sheet: Sheet, content: PacketContent): void {
  const { entries } = content.record;
  sheet.during('Ledger, continued', () => {
    sheet.newPage();
    sheet.anchor('ledger');
    sheet.layer.bookmark('Ledger', 0, sheet.y);
    sheet.paragraph(`The ledger: ${counted(entries.length, 'entry', 'entries')}, in order`, types.h1, { tag: 'H1' });
    sheet.gap(8);
    sheet.layer.tag('L', () => {
      for (const entry of entries) sheet.layer.tag('LI', () => drawLine(sheet, entry, content));
    });
  });
}

function drawLine(sheet: Sheet, entry: EntryView, { zone }: PacketContent): void {
  const width = markRight - markSize / 2 - 24 - at.what;
  const all = breakLines(entry.title, 'medium', 9.5, width);
  const lines = all.length > mostLines ? [...all.slice(0, mostLines - 1), `${all[mostLines - 1]} …`] : all;
  const about = entry.refersTo === null ? '' : `about entry ${entry.refersTo.seq}; `;
  const added = entry.addenda.length === 0 ? '' : `; added to in ${entry.addenda.join(', ')}`;
  const details = `${about}sealed ${formatLocalDate(localDateOf(entry.sealedAt, zone))}${added}`;
  const remarks = remarksOf(entry).flatMap((remark) => breakLines(remark, types.small.face, types.small.size, width));
  const said =
    remarks.length > mostLines ? [...remarks.slice(0, mostLines - 1), `${remarks[mostLines - 1]} …`] : remarks;
  const height = Math.max(58, lines.length * types.value.leading + (1 + said.length) * types.small.leading + 14);
  sheet.room(height);
  const { layer, y } = sheet;
  const odometer = odometerOf(entry);
  layer.tag('LBody', () => {
    sheet.lineAt(String(entry.seq), at.number, y + 7, { ...types.number, size: 12 });
    sheet.lineAt(dateOf(entry, zone), at.date, y + 9, types.body);
    sheet.lineAt(odometer, at.odometer, y + 9, types.body);
    lines.forEach((line, i) => {
      const top = y + 8 + i * types.value.leading;
      const drawn = sheet.lineAt(line, at.what, top, types.value);
      const middle = top + types.value.leading * 0.55;
      if (entry.struckBy !== null)
        layer.line(at.what, middle, at.what + drawn, middle, { stroke: colours.ink, width: 0.9 });
    });
    const below = y + 9 + lines.length * types.value.leading;
    sheet.lineAt(details, at.what, below, types.small);
    sheet.block(said, at.what, below + types.small.leading, { ...types.small, colour: colours.gap });
  });
  drawMark(sheet, entry.state, entry.leafHash, markRight - markSize / 2, y + 4, markSize);
  layer.tag('LBody', () => {
    const words = entry.struckBy === null ? markWords[entry.state] : `struck by ${entry.struckBy.seq}`;
    sheet.lineAt(words, markRight, y + 43, types.small, 'centre');
    sheet.lateAt(() => `page ${sheet.pageOf(entryAnchor(entry.seq))}`, edges.right, y + 9, types.small, 'right');
  });
  sheet.y += height;
  layer.line(edges.left, sheet.y, edges.right, sheet.y, { stroke: colours.hair, width: 0.6 });
}

/** What nobody may pass over: that it was withdrawn and why, or what its checks name as gaps. */
function remarksOf(entry: EntryView): string[] {
  if (entry.struckBy !== null) {
    const { seq, reason } = entry.struckBy;
    return [`Struck by entry ${seq}${reason === '' ? '.' : `: ${reason}`}`];
  }
  if (!isService(entry) || entry.body === null) return [];
  const gaps = entry.body.checks.filter(({ result }) => result === 'gap');
  return gaps.map(({ key, detail }) => `Gap: ${detail === '' ? checkTitle(key) : detail}`);
}

function dateOf(entry: EntryView, zone: string): string {
  if (isService(entry) && entry.body !== null) return formatLocalDate(entry.body.finishedAt.date);
  return formatLocalDate(localDateOf(entry.sealedAt, zone));
}

function odometerOf(entry: EntryView): string {
  if (!isService(entry) || entry.body === null) return '';
  return entry.body.odometer === undefined ? 'unknown' : odometerWords(entry.body.odometer);
}
