import { capacityWords } from '@/lib/domain/record-words';
import 'server-only';
import { formatLocalDate, isLocalDate, localDateOf } from '@/lib/domain/instants';
import { isUnitCode } from '@/lib/domain/units';
import type { Odometer, OpeningBody, Task, TermsBody } from '@/lib/evidence/format';
import type { EntryView } from '@/lib/services/record-view';
import type { PacketContent } from '../content';
import { drawBoxes, type Cell } from '../sheet/boxes';
import type { Sheet } from '../sheet/sheet';
import { confirmedWords, counted, odometerWords, sentence } from '../words';
import { ownSignatureCells, ownSignatureSentence } from './own-signature';
import { drawTask } from './task';

const startWords: Record<OpeningBody['recordStarts']['why'], string> = {
  new: 'The machine was new',
  'bought-used': 'Bought used: what was before is unknown',
  'from-paper': 'Continued from paper',
  continues: 'Continued from another installation',
};

/** What an entry that is no service says. */
export function drawBody(sheet: Sheet, entry: EntryView, content: PacketContent): void {
  if (entry.body === null || entry.body === undefined) {
    drawBoxes(sheet, 1, [{ label: 'What it says', value: 'withheld' }]);
    return;
  }
  const about: Cell[] =
    entry.refersTo === null
      ? []
      : [{ label: 'About', value: `Entry ${entry.refersTo.seq}, ${titleOf(entry.refersTo.seq, content)}`, span: 4 }];
  if (entry.kind === 'opening') drawBoxes(sheet, 4, openingCells(entry.body as OpeningBody));
  else if (entry.kind === 'terms') drawTerms(sheet, entry.body as TermsBody, entry.seq, content);
  else if (entry.kind === 'countersignature') {
    const { capacity, statement, shop, invitedBy } = entry.body;
    const value = [shop.name, shop.address, shop.registration].filter(Boolean).join(', ');
    const since = formatLocalDate(localDateOf(shop.accountSince, content.zone));
    const known = `The shop’s account exists since ${since}; ${confirmedWords(shop.confirmedBy)}.`;
    drawBoxes(sheet, 4, [
      ...about,
      { label: 'In which capacity', value: sentence(capacityWords[capacity]), span: 2 },
      { label: 'Invited by', value: invitedBy, span: 2 },
      { label: 'Shop', value, note: known, span: 4, isGap: shop.confirmedBy === null },
      { label: 'Statement', value: statement, span: 4 },
      { label: 'Own signature', value: ownSignatureSentence(entry.ownSignature), span: 4 },
    ]);
  } else if (entry.kind === 'signature' || entry.kind === 'key') {
    drawBoxes(sheet, 4, [...about, ...ownSignatureCells(entry)]);
  } else {
    drawBoxes(sheet, 4, [...about, ...otherCells(entry.body)]);
    drawExtra(sheet, entry.body, content);
  }
}

const titleOf = (seq: number, { record }: PacketContent): string =>
  record.entries.find((entry) => entry.seq === seq)?.title ?? 'not in this packet';

function openingCells(body: OpeningBody): Cell[] {
  const { firstUse, recordStarts, continues } = body;
  return [
    { label: 'Machine', value: [body.modelYear, body.make, body.model].filter(Boolean).join(' '), span: 2 },
    { label: 'Kind', value: body.kindOfMachine, span: 2 },
    {
      label: 'First use',
      value: firstUse?.on === undefined ? 'not stated' : formatLocalDate(firstUse.on),
      note: firstUse?.odometer === undefined ? undefined : odometerWords(firstUse.odometer),
      span: 2,
    },
    {
      label: 'The record starts',
      value: formatLocalDate(recordStarts.on),
      note: [startWords[recordStarts.why], recordStarts.odometer && odometerWords(recordStarts.odometer)]
        .filter(Boolean)
        .join(', '),
      span: 2,
    },
    ...(continues === undefined ? [] : [{ label: 'Continues the log', value: continues.log, span: 4 }]),
  ];
}

/** The newest terms are printed whole on their own pages; of older ones, what each held is counted here. */
function drawTerms(sheet: Sheet, body: TermsBody, seq: number, { record }: PacketContent): void {
  const isNewest = record.terms !== null && record.termsBySeq.get(seq) === record.terms;
  const counts = [
    counted(body.schedule.length, 'schedule item', 'schedule items'),
    counted(body.fluidPoints.length, 'fluid point', 'fluid points'),
    counted(body.fasteners.length, 'fastener', 'fasteners'),
    counted(body.parts.length, 'part', 'parts'),
    counted(body.warranty.length, 'warranty term', 'warranty terms'),
  ].join(', ');
  const note = isNewest
    ? 'The terms that hold: printed whole on the terms page.'
    : 'Replaced by other terms; whole in the attached record.json.';
  drawBoxes(sheet, 1, [{ label: 'Terms sealed', value: counts, note }]);
}

const isObject = (value: unknown): value is Record<string, unknown> => typeof value === 'object' && value !== null;
const isOdometer = (value: unknown): value is Odometer =>
  isObject(value) && typeof value.value === 'string' && typeof value.unit === 'string' && isUnitCode(value.unit);
const taskMembers = ['steps', 'inspections', 'fills', 'torques', 'parts', 'levelChecks'] as const;

function otherCells(body: unknown): Cell[] {
  if (!isObject(body)) return [];
  return Object.entries(body).flatMap(([name, value]): Cell[] => {
    const label = sentence(name.replace(/[A-Z]/g, (letter) => ` ${letter.toLowerCase()}`));
    if (isOdometer(value)) return [{ label, value: odometerWords({ ...value, instrument: value.instrument ?? 0 }) }];
    if (typeof value === 'string') {
      if (isLocalDate(value)) return [{ label, value: formatLocalDate(value) }];
      return [{ label, value, span: value.length > 40 ? 4 : 2 }];
    }
    return [];
  });
}

function drawExtra(sheet: Sheet, body: unknown, { record }: PacketContent): void {
  if (!isObject(body) || !taskMembers.some((member) => Array.isArray(body[member]))) return;
  // The log's own checks have read this body by the shape of a task; only members that are lists are drawn.
  const lists = Object.fromEntries(
    taskMembers.flatMap((name) => (Array.isArray(body[name]) ? [[name, body[name]]] : [])),
  );
  drawTask(sheet, { title: 'What was done', ...(lists as Partial<Task>) }, record);
}
