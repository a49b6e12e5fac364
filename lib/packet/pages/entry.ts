import { capacityWords } from '@/lib/domain/record-words';
import 'server-only';
import { checkTitle } from '@/lib/domain/checks';
import { describeDelay, formatInstant, formatLocalDate, formatLocalMoment, localDateOf } from '@/lib/domain/instants';
import type { ServiceBody } from '@/lib/evidence/format';
import type { EntryView, RecordView } from '@/lib/services/record-view';
import { entryAnchor, isService, type PacketContent } from '../content';
import { colours } from '../layer/colours';
import { breakLines } from '../layer/shaping';
import { drawBoxes, type Cell } from '../sheet/boxes';
import { drawMark, markWords } from '../sheet/mark';
import { drawPlates } from '../sheet/plates';
import { contentWidth, edges, types, type Sheet } from '../sheet/sheet';
import { drawTable } from '../sheet/table';
import { confirmedWords, kindWords, lowered, odometerWords, performerWords, sentence } from '../words';
import { drawBody } from './entry-body';
import { absentWord, drawAddenda, drawStruck } from './later-words';
import { drawLeaf, provenCell } from './leaf';
import { drawSignedBy, ownSignatureSentence } from './own-signature';
import { platesOf } from './plates-of';
import { drawTask } from './task';

const markSize = 40;

/** One entry. A service begins a page of its own; shorter statements follow each other. */
export function drawEntry(sheet: Sheet, entry: EntryView, content: PacketContent): void {
  const name = `Entry ${entry.seq}`;
  sheet.during(`${name}, continued: ${entry.title.slice(0, 80)}`, () => {
    if ((isService(entry) && entry.body !== null) || sheet.left < 200) sheet.newPage();
    else sheet.gap(26);
    sheet.anchor(entryAnchor(entry.seq));
    sheet.layer.bookmark(`${entry.seq} ${entry.title}`, 1, sheet.y - 6);
    drawHead(sheet, entry, content);
    if (entry.struckBy !== null) drawStruck(sheet, entry.struckBy, content);
    drawBoxes(sheet, 4, timeCells(entry, content));
    if (isService(entry) && entry.body !== null) {
      for (const task of entry.body.tasks) drawTask(sheet, task, content.record);
    } else {
      drawBody(sheet, entry, content);
    }
    drawFollowing(sheet, entry, content);
    drawLeaf(sheet, entry, content);
  });
}

function drawHead(sheet: Sheet, entry: EntryView, { zone }: PacketContent): void {
  const { layer, y } = sheet;
  const x = edges.left + markSize + 10;
  const title = { ...types.h1, size: 19, leading: 21 };
  const width = contentWidth - markSize - 10;
  const all = breakLines(entry.title, title.face, title.size, width);
  const isLong = all.length > 4;
  const type = isLong ? { ...types.h2 } : title;
  const lines = isLong ? breakLines(entry.title, type.face, type.size, width) : all;
  const delay =
    isService(entry) && entry.body !== null ? `, ${describeDelay(entry.body.finishedAt, entry.sealedAt)}` : '';
  const label =
    `Entry ${entry.seq}, ${kindWords[entry.kind].toLowerCase()}, ${markWords[entry.state]}. ` +
    `Sealed ${formatInstant(entry.sealedAt, zone)}${delay}`;
  drawMark(sheet, entry.state, entry.leafHash, edges.left, y - 2, markSize);
  layer.tag('P', () => sheet.lineAt(label, x, y + 2, types.label));
  layer.tag('H2', () => {
    lines.forEach((line, i) => {
      const top = y + 13 + i * type.leading;
      const drawn = sheet.lineAt(line, x, top, type);
      if (entry.struckBy === null) return;
      layer.line(x, top + type.leading * 0.55, x + drawn, top + type.leading * 0.55, {
        stroke: colours.ink,
        width: 1.2,
      });
    });
  });
  sheet.y = y + Math.max(markSize + 4, 13 + lines.length * type.leading + 6);
}

function timeCells(entry: EntryView, { zone, record }: PacketContent): Cell[] {
  const sealed: Cell = {
    label: 'Sealed by this installation',
    value: formatInstant(entry.sealedAt, zone),
    note: zone,
  };
  const author: Cell = {
    label: 'Sealed by',
    value: entry.author?.sealedBy ?? entry.author?.name ?? absentWord(entry.erasures, 'author'),
    note: entry.author === null ? undefined : entry.author.role,
  };
  if (!isService(entry) || entry.body === null) return [sealed, provenCell(entry.tokens, zone), { ...author, span: 2 }];
  return [
    ...claimedCells(entry.body),
    sealed,
    provenCell(entry.tokens, zone),
    ...workCells(entry, entry.body, record),
    author,
  ];
}

function claimedCells(body: ServiceBody): Cell[] {
  const started = body.startedAt === undefined ? '' : `begun ${formatLocalMoment(body.startedAt)}; `;
  const paper = body.recorded === 'from-paper' ? '; recorded later, from paper' : '';
  return [
    {
      label: 'Work done, as claimed',
      value: formatLocalMoment(body.finishedAt),
      note: `${started}${body.finishedAt.zone}${paper}`,
    },
  ];
}

function workCells(entry: EntryView, body: ServiceBody, record: RecordView): Cell[] {
  const people = body.performedBy.map(({ person, capacity }) => {
    const author = record.entries.find((one) => one.author?.person === person)?.author;
    return `${author?.name ?? person} (${performerWords[capacity]})`;
  });
  const odometer: Cell =
    body.odometer === undefined
      ? { label: 'Odometer', value: 'unknown', note: body.odometerUnknown?.why, isGap: true }
      : { label: 'Odometer', value: odometerWords(body.odometer), kind: 'number' };
  const hours: Cell[] =
    body.engineHours === undefined ? [] : [{ label: 'Engine hours', value: `${body.engineHours} h`, kind: 'number' }];
  const order: Cell[] = body.workOrder === undefined ? [] : [{ label: 'Work order', value: body.workOrder }];
  const done = people.length === 0 ? 'not stated' : people.join(', ');
  return [odometer, ...hours, { label: 'Work done by', value: sentence(done) }, ...order];
}

function drawFollowing(sheet: Sheet, entry: EntryView, content: PacketContent): void {
  if (entry.attachments.length > 0) {
    drawPlates(sheet, platesOf(String(entry.seq), entry.attachments, content), 'Plates');
  }
  if (isService(entry) && entry.body !== null) {
    drawChecks(sheet, entry.body);
    if (entry.body.statement !== '') {
      sheet.heading('Statement', { tag: 'H3', below: 30 });
      sheet.paragraph(entry.body.statement);
    }
  }
  if (entry.notes !== null) {
    sheet.heading('Notes', { tag: 'H3', below: 30 });
    sheet.paragraph(entry.notes);
  }
  if (entry.countersignatures.length > 0) drawCountersignatures(sheet, entry, content);
  drawSignedBy(sheet, entry, content);
  drawAddenda(sheet, entry, content);
}

function drawChecks(sheet: Sheet, { checks }: ServiceBody): void {
  if (checks.length === 0) return;
  const answered = checks.filter(({ result }) => result !== 'not-applicable');
  const others = checks.filter(({ result }) => result === 'not-applicable');
  sheet.heading('Reader’s checks, as they stood at sealing', { tag: 'H3', below: 60 });
  if (answered.length > 0) {
    drawTable(
      sheet,
      [
        { title: 'Question', share: 3 },
        { title: 'Answer', share: 0.9, type: types.strong },
        { title: 'Detail', share: 6 },
      ],
      answered.map(({ key, result, detail }) => [checkTitle(key), { text: result, isGap: result === 'gap' }, detail]),
    );
  }
  if (others.length === 0) return;
  sheet.gap(4);
  const words = others.map(({ key, detail }) =>
    detail === '' ? checkTitle(key) : `${checkTitle(key)} (${lowered(detail)})`,
  );
  sheet.paragraph(`Does not apply: ${words.join('; ')}.`, types.small);
}

function drawCountersignatures(sheet: Sheet, entry: EntryView, { zone }: PacketContent): void {
  sheet.heading('Countersigned', { tag: 'H3', below: 60 });
  for (const { seq, sealedAt, author, body, ownSignature } of entry.countersignatures) {
    const { shop } = body;
    const since = formatLocalDate(localDateOf(shop.accountSince, zone));
    sheet.paragraph(
      `“${body.statement}” ${author?.name ?? 'Name withheld'}, ${shop.name}, who ${capacityWords[body.capacity]}. ` +
        `Entry ${seq} of this record, sealed ${formatInstant(sealedAt, zone)}. Invited by ${body.invitedBy}. ` +
        `The shop’s account exists since ${since}; the shop is ${confirmedWords(shop.confirmedBy)}. ` +
        ownSignatureSentence(ownSignature),
    );
    sheet.gap(3);
  }
}
