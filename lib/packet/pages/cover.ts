import 'server-only';
import type { AdherenceSummary } from '@/lib/domain/adherence';
import { formatInstant, formatLocalDate } from '@/lib/domain/instants';
import { missingWord } from '@/lib/domain/record-words';
import { formatDistance } from '@/lib/domain/units';
import { whatIsShown } from '@/lib/evidence/format';
import { entryAnchor, type PacketContent } from '../content';
import { breakLines } from '../layer/shaping';
import { drawBoxes } from '../sheet/boxes';
import { drawMark } from '../sheet/mark';
import { contentWidth, edges, types, type Sheet } from '../sheet/sheet';
import { drawTable } from '../sheet/table';
import type { PacketSummary } from '../summary';
import { servicesWords } from '../summary/opened';
import { counted, limitWords, lowered, roundedOf } from '../words';
import { drawDoneInTime } from './done-in-time';

const markSize = 66;

/** The first page: the news, the counts, the gaps, the schedule kept or not, and what was bought and used. */
export function drawCover(sheet: Sheet, content: PacketContent, summary: PacketSummary): void {
  sheet.during('Cover, continued', () => {
    sheet.newPage();
    sheet.layer.bookmark('Cover', 0, 0);
    drawHead(sheet, content, summary);
    const { counts, gaps, opened } = summary;
    drawBoxes(sheet, 5, [
      { label: 'Entries opened', value: counts.entries, kind: 'number', note: withheldWords(summary) },
      { label: 'Sealed within 7 days', value: counts.prompt, kind: 'number', note: servicesWords(opened) },
      { label: 'Time proven independently', value: counts.proven, kind: 'number', isGap: counts.proven === 'none' },
      { label: 'Countersigned', value: counts.countersigned, kind: 'number', note: servicesWords(opened) },
      {
        label: 'Gaps',
        value: gaps.length === 0 ? 'none found' : `${gaps.length}, below`,
        kind: 'number',
        isGap: gaps.length > 0,
      },
    ]);
    drawWarranty(sheet, summary);
    drawGaps(sheet, summary);
    drawSchedule(sheet, content, summary);
    drawUses(sheet, summary);
    drawWhatIsShown(sheet);
  });
}

function drawHead(sheet: Sheet, content: PacketContent, { headline, now }: PacketSummary): void {
  const { record, number, madeAt, zone, owner, purpose } = content;
  const width = contentWidth - markSize - 18;
  const full = breakLines(headline, types.h1.face, types.h1.size, width);
  const type = full.length > 4 ? { ...types.h1, size: 16, leading: 18 } : types.h1;
  const lines = full.length > 4 ? breakLines(headline, type.face, type.size, width) : full;
  const newest = record.entries.at(-1);
  const { layer } = sheet;
  const label = `Service record packet, made ${formatInstant(madeAt, zone)} (${zone}), number ${number}`;
  layer.tag('P', () => sheet.lineAt(label, edges.left, sheet.y, types.label));
  sheet.gap(types.label.leading + 2);
  if (newest !== undefined)
    drawMark(sheet, newest.state, newest.leafHash, edges.right - markSize, sheet.y - 4, markSize);
  const top = sheet.y;
  layer.tag('H1', () => sheet.block(lines, edges.left, top, type));
  sheet.y = Math.max(top + lines.length * type.leading + 6, top);
  const words = breakLines(machineWords(content, owner, purpose, now), types.body.face, types.body.size, width);
  layer.tag('P', () => sheet.block(words, edges.left, sheet.y, types.body));
  sheet.y = Math.max(sheet.y + words.length * types.body.leading, top + markSize) + 12;
}

/** Every line stays in the file; what is closed is counted here, on the first page. */
function withheldWords({ opened: { partsWithheld, partsErased } }: PacketSummary): string {
  const erased = partsErased === 0 ? '' : `, ${counted(partsErased, 'part', 'parts')} erased`;
  return `${counted(partsWithheld, 'part', 'parts')} withheld${erased}`;
}

function machineWords(
  { record }: PacketContent,
  owner: string | null,
  purpose: string,
  now: PacketSummary['now'],
): string {
  const { machine, identity, opening } = record;
  const name = [machine.modelYear, machine.make, machine.model].filter(Boolean).join(' ');
  const vin = identity?.vin === undefined ? undefined : `VIN ${identity.vin}`;
  const frame = identity?.frameNumber === undefined ? undefined : `frame number ${identity.frameNumber}`;
  const { firstUse } = opening;
  const used = firstUse?.on === undefined ? 'First use not stated' : `First used ${formatLocalDate(firstUse.on)}`;
  const at = firstUse?.odometer === undefined ? '' : ` at ${formatDistance(firstUse.odometer)}`;
  const today = now === undefined ? '' : `; last opened reading ${formatDistance(now)} on ${formatLocalDate(now.on)}`;
  const made = purpose === '' ? '' : ` Made for: ${purpose}${/[.!?]$/.test(purpose) ? '' : '.'}`;
  return `${[name, vin ?? frame ?? `VIN ${missingWord('identity', record.entries[0])}`].join(', ')}. ${used}${at}${today}. ${owner === null ? 'Owner withheld' : `Owner ${owner}`}.${made}`;
}

function drawWarranty(sheet: Sheet, { warranty }: PacketSummary): void {
  if (warranty.length === 0) return;
  sheet.gap(6);
  for (const { title, sentence } of warranty) sheet.paragraph(`${title}: ${lowered(sentence)}`);
  sheet.paragraph('The warranty’s own text decides; this only counts.', types.small);
}

function drawSchedule(sheet: Sheet, { record }: PacketContent, summary: PacketSummary): void {
  const shown = summary.items.filter(({ summary: { done, late } }) => done > 0 || late > 0);
  const others = summary.items.filter((item) => !shown.includes(item));
  const isJudged = summary.opened.unjudged === 0;
  sheet.heading(isJudged ? 'Done in time' : 'Done, as far as opened', { below: isJudged ? 120 : 60 });
  if (shown.length === 0) {
    sheet.paragraph(`No item of the schedule has been done in ${isJudged ? 'this record yet' : 'what is opened'}.`);
    return;
  }
  if (isJudged) drawDoneInTime(sheet, summary, shown);
  drawTable(
    sheet,
    [
      { title: 'Item', share: 3.2 },
      { title: 'Limit', share: 2.7 },
      { title: 'Done', share: 0.8, type: types.strong },
      { title: 'Longest distance, longest time', share: 2.2, type: types.strong },
      { title: 'Result', share: 2.2 },
    ],
    shown.map(({ item, summary: one, isJudged: isKnown }) => [
      item.title,
      limitWords(item),
      String(one.done),
      isKnown ? longestWords(one) : '',
      { text: one.sentence, isGap: one.late > 0 },
    ]),
  );
  sheet.gap(3);
  if (others.length > 0) {
    const words = others.map(({ item, summary: one }) => `${lowered(item.title)} (${one.sentence})`);
    const titles = others.map(({ item }) => lowered(item.title)).join(', ');
    const told = isJudged ? `Not done in this record yet: ${words.join(', ')}.` : `Not in what is opened: ${titles}.`;
    sheet.paragraph(told, types.small);
  }
  const terms = [...record.termsBySeq.keys()].sort((a, b) => a - b);
  const newest = isJudged
    ? `Judged by the newest terms, entry ${terms.at(-1)}.`
    : `The newest terms are entry ${terms.at(-1)}.`;
  const earlier = terms.length < 2 ? '' : ` Terms were sealed ${terms.length} times, in entries ${terms.join(', ')}.`;
  sheet.paragraph(newest + earlier, types.small);
}

function longestWords({ longestDistance, longestMonths, longestDays }: AdherenceSummary): string {
  const distance =
    longestDistance === undefined
      ? undefined
      : formatDistance({ amount: roundedOf(longestDistance), unit: longestDistance.unit });
  return [distance, longestMonths >= 1 ? `${longestMonths} mo` : `${longestDays} days`].filter(Boolean).join(', ');
}

function drawUses(sheet: Sheet, { uses }: PacketSummary): void {
  sheet.heading('Bought and used');
  if (uses.length === 0) {
    sheet.paragraph('No fluid or part in what is opened was drawn from a receipt.');
    return;
  }
  drawTable(
    sheet,
    [
      { title: 'Fluid or part', share: 3 },
      { title: 'Bought', share: 2.6, type: types.strong },
      { title: 'Used on this machine', share: 2.6, type: types.strong },
      { title: 'Left, or used elsewhere', share: 1.9, type: types.strong },
    ],
    uses.map(({ what, bought, used, left, uncovered }) => [
      what,
      { text: bought, isGap: uncovered !== '' },
      used,
      left,
    ]),
  );
}

function drawGaps(sheet: Sheet, { gaps }: PacketSummary): void {
  sheet.heading('Gaps');
  if (gaps.length === 0) {
    sheet.paragraph('None found in what is opened.');
    return;
  }
  drawTable(
    sheet,
    [{ title: 'Entry', share: 1 }, { title: 'What is missing or late', share: 8 }, { title: '', share: 1 }],
    gaps.map(({ seq, isWhole, sentence }) => [
      seq === null ? (isWhole === true ? 'Record' : 'Now') : `Entry ${seq}`,
      sentence,
      seq === null ? '' : { late: () => `page ${sheet.pageOf(entryAnchor(seq))}` },
    ]),
  ); // prettier-ignore
}

/** Two columns, read one after the other; the page of the last part is known only at the end. */
function drawWhatIsShown(sheet: Sheet): void {
  const gutter = 18;
  const width = (contentWidth - gutter) / 2;
  const words = `${whatIsShown} The attached file record.json lets anybody check this without the owner’s help: see “How to check this packet”, the last pages.`;
  const lines = breakLines(words, types.body.face, types.body.size, width);
  const half = Math.ceil(lines.length / 2);
  sheet.heading('What this packet shows, and what it cannot', { below: half * types.body.leading + 4 });
  sheet.layer.tag('P', () => {
    sheet.block(lines.slice(0, half), edges.left, sheet.y, types.body);
    sheet.block(lines.slice(half), edges.left + width + gutter, sheet.y, types.body);
  });
  sheet.y += half * types.body.leading;
}
