import 'server-only';
import { distanceLine } from '@/lib/domain/odometer';
import { ruleEnd, ruleTicks } from '@/lib/domain/rule-ticks';
import { formatDistance, units } from '@/lib/domain/units';
import type { AdherenceInterval } from '@/lib/domain/adherence';
import { colours } from '../layer/colours';
import { breakLines, widthOf } from '../layer/shaping';
import { edges, types, type Sheet } from '../sheet/sheet';
import type { PacketSummary } from '../summary';
import type { ItemSummary } from '../summary/items';
import { roundedOf } from '../words';

const labelWidth = 104;
const unitWidth = 22;
const ruleHeight = 17;
const laneHeight = 23;
/** More would push what was bought, and the gaps, from sight; the table below has every item. */
const mostLanes = 8;
const left = edges.left + labelWidth;
const right = edges.right - unitWidth;

/** The steel rule with a lane for each item: notches where it was done, figures between them, late ones in red-brown. */
export function drawDoneInTime(sheet: Sheet, { history, now }: PacketSummary, items: ItemSummary[]): void {
  if (now === undefined) return;
  const line = distanceLine(history.readings, now.unit);
  const total = line.total(now).toNumber();
  const from = 0;
  if (!(total > from)) return;
  const to = ruleEnd(from, total);
  const xOf = (figure: number) => left + ((figure - from) / (to - from)) * (right - left);
  const lanes = lanesOf(items);
  const height = ruleHeight + 14 + lanes.length * laneHeight;
  sheet.room(height);
  const { layer } = sheet;
  const top = sheet.y;
  const words = lanes.map(({ item, summary }) => `${item.title}: done ${summary.done} times, ${summary.sentence}`);
  layer.tag(
    'Figure',
    () => {
      drawRule(sheet, top, xOf, from, to, units[now.unit].label);
      const flag = xOf(total);
      layer.line(flag, top - 2, flag, top + height - 8, { stroke: colours.ink, width: 0.6, dash: [2, 2] });
      lanes.forEach((lane, i) => {
        const y = top + ruleHeight + 16 + i * laneHeight;
        drawLane(sheet, lane, y, (odometer) => xOf(line.total(odometer).toNumber()));
      });
      const label = `now ${formatDistance(now)}`;
      const isLate = flag + widthOf(label, 'semibold', 7.2) + 4 > right;
      sheet.lineAt(label, isLate ? flag - 3 : flag + 3, top + height - 15, { ...types.small, face: 'semibold', colour: colours.ink }, isLate ? 'right' : 'left'); // prettier-ignore
    },
    {
      alt: `A rule in ${units[now.unit].label} with a lane for each item. ${words.join('. ')}.`,
      box: [edges.left, top, edges.right, top + height],
    },
  );
  sheet.y = top + height + 4;
}

/** Late items first to be kept, then as the schedule lists them. */
function lanesOf(items: ItemSummary[]): ItemSummary[] {
  if (items.length <= mostLanes) return items;
  const ranked = [...items].sort((a, b) => b.summary.late - a.summary.late || b.summary.done - a.summary.done);
  const kept = new Set(ranked.slice(0, mostLanes));
  return items.filter((item) => kept.has(item));
}

function drawRule(sheet: Sheet, top: number, xOf: (figure: number) => number, from: number, to: number, unit: string) {
  const { layer } = sheet;
  layer.rect(left, top, right - left, ruleHeight, { fill: colours.steel, stroke: colours.line, width: 0.7 });
  const heights = { major: ruleHeight - 6, mid: 6.5, minor: 3.5 };
  for (const { at, level, text } of ruleTicks(from, to)) {
    const x = xOf(at);
    const bottom = top + ruleHeight;
    layer.line(x, bottom, x, bottom - heights[level], { stroke: colours.ink, width: level === 'major' ? 0.9 : 0.4 });
    const hasRoom = text !== undefined && x + widthOf(text, 'semibold', 7) + 3 < right;
    if (hasRoom) sheet.lineAt(text, x + 2, top + 1, { face: 'semibold', size: 7, leading: 8 });
  }
  sheet.lineAt(unit, right + 5, top + 3, { face: 'medium', size: 8.5, leading: 11 });
}

type Odometer = NonNullable<AdherenceInterval['to']['odometer']>;

function drawLane(
  sheet: Sheet,
  { item, intervals }: ItemSummary,
  y: number,
  xOf: (odometer: Odometer) => number,
): void {
  const { layer } = sheet;
  const label = { face: 'medium', size: 8.2, leading: 9.6 } as const;
  const lines = breakLines(item.title, label.face, label.size, labelWidth - 8);
  const shown = lines.length > 2 ? [lines[0] ?? '', `${lines[1]} …`] : lines;
  sheet.block(shown, edges.left, y - (shown.length * label.leading) / 2, label);
  layer.line(left, y, right, y, { stroke: colours.line, width: 0.8 });
  for (const interval of intervals) {
    const { from, to } = interval;
    if (to.odometer === undefined) continue;
    const x = xOf(to.odometer);
    const start = from.odometer === undefined ? undefined : xOf(from.odometer);
    if (start !== undefined) drawInterval(sheet, interval, start, x, y);
    if (to.what === 'done') drawNotch(sheet, x, y);
  }
}

function drawInterval(sheet: Sheet, interval: AdherenceInterval, from: number, to: number, y: number): void {
  const { distance, months, isRunning, result } = interval;
  if (distance === undefined || isRunning) return;
  const isLate = result === 'late';
  const miles = formatDistance({ amount: roundedOf(distance), unit: distance.unit });
  const words = [isLate ? `${miles}, ${months} mo, late` : `${miles}, ${months} mo`, isLate ? 'late' : miles];
  const fitting = words.find((text) => widthOf(text, 'text', 6.8) < to - from - 10);
  if (isLate) sheet.layer.line(from, y, to, y, { stroke: colours.limit, width: 1.6, dash: [3, 1.5] });
  if (fitting === undefined) return;
  const type = { face: isLate ? 'semibold' : 'text', size: 6.8, leading: 8 } as const;
  sheet.lineAt(fitting, (from + to) / 2, y - 9.5, { ...type, colour: isLate ? colours.gap : colours.soft }, 'centre');
}

function drawNotch(sheet: Sheet, x: number, y: number): void {
  sheet.layer.path('M -3 -6 L 3 -6 L 0 0 Z', { x, y, scale: 1 }, { fill: colours.petrol });
  sheet.layer.line(x, y - 6, x, y + 5.5, { stroke: colours.petrol, width: 1.5 });
}
