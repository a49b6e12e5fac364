import 'server-only';
import { partWords } from '@/lib/domain/erasure';
import { formatInstant } from '@/lib/domain/instants';
import type { PartName } from '@/lib/evidence/format';
import type { EntryView, ErasureView, StruckView } from '@/lib/services/record-view';
import type { PacketContent } from '../content';
import { drawBoxes } from '../sheet/boxes';
import type { Sheet } from '../sheet/sheet';

/** By which line, when, by whom and why; `what` is an entry of the record or a line of a shelf's log. */
export function drawStruck(sheet: Sheet, struck: StruckView, { zone }: PacketContent, what = 'entry'): void {
  const { seq, sealedAt, reason, by } = struck;
  const who = by === undefined ? '' : `, by ${by}`;
  const why = reason === '' ? '; its reason is withheld.' : `: ${reason}`;
  const value = `Struck by ${what} ${seq} on ${formatInstant(sealedAt, zone)}${who}${why}`;
  drawBoxes(sheet, 1, [{ label: 'Withdrawn, and still readable', value, isGap: true }]);
  sheet.gap(6);
}

/** What was added to an entry later, in its own words; the pictures stand where the addendum itself does. */
export function drawAddenda(sheet: Sheet, entry: EntryView, { record, zone }: PacketContent): void {
  const added = record.entries.filter((one) => one.kind === 'addendum' && one.refersTo?.seq === entry.seq);
  if (added.length === 0) return;
  sheet.heading('Added later', { tag: 'H3', below: 44 });
  for (const one of added) {
    sheet.paragraph(`${textOf(one)} ${fromWords(one, zone)}`);
    sheet.gap(3);
  }
}

function textOf({ body, struckBy }: EntryView): string {
  const text = typeof body === 'object' && body !== null && 'text' in body ? body.text : undefined;
  const struck = struckBy === null ? '' : `Struck by entry ${struckBy.seq}, and still readable: `;
  return typeof text === 'string' ? `${struck}“${text}”` : `${struck}Its text is withheld.`;
}

function fromWords({ seq, sealedAt, author, attachments }: EntryView, zone: string): string {
  const pictures = attachments.length === 0 ? '' : ` With ${attachments.length === 1 ? 'one plate' : `${attachments.length} plates`}, shown there.`; // prettier-ignore
  return `${author?.name ?? 'Author not shown'}, entry ${seq}, sealed ${formatInstant(sealedAt, zone)}.${pictures}`;
}

/** Why a part is not shown: kept back from this reader, or destroyed for good. */
export function absentWord(erasures: readonly ErasureView[] | undefined, part: PartName): 'erased' | 'withheld' {
  return erasures?.some(({ name }) => name === part) === true ? 'erased' : 'withheld';
}

/** One sentence for each part that was destroyed. */
export function erasedWords(erasures: readonly ErasureView[], zone: string): string {
  return erasures
    .map(
      ({ name, erasedAt, recordedSeq }) =>
        `The ${partWords[name]} ${name === 'author' || name === 'contact' || name === 'supplier' ? 'was' : 'were'} erased for good on ${formatInstant(erasedAt, zone)}, as recorded in ${recordedSeq}.`,
    )
    .join(' ');
}
