import 'server-only';
import { formatLocalDate } from '@/lib/domain/instants';
import { missingWord } from '@/lib/domain/record-words';
import { formatDistance, units } from '@/lib/domain/units';
import type { TermsBody } from '@/lib/evidence/format';
import type { PacketContent } from '../content';
import { drawBoxes } from '../sheet/boxes';
import { types, type Sheet } from '../sheet/sheet';
import { drawTable } from '../sheet/table';
import { amountsWords, intervalWords, odometerWords, sourceWords } from '../words';

/** The machine, its warranty, and the newest sealed terms, every figure with its source. */
export function drawTerms(sheet: Sheet, content: PacketContent): void {
  const { record } = content;
  sheet.during('Machine and terms, continued', () => {
    sheet.newPage();
    sheet.anchor('terms');
    sheet.layer.bookmark('Machine and terms', 0, sheet.y);
    sheet.paragraph('Machine and terms', types.h1, { tag: 'H1' });
    sheet.gap(8);
    drawMachine(sheet, content);
    const { terms } = record;
    if (terms === null) {
      sheet.gap(10);
      sheet.paragraph('No terms are opened in this packet.');
      return;
    }
    const seq = Math.max(...record.termsBySeq.keys());
    sheet.gap(8);
    sheet.paragraph(
      `The newest terms, sealed as entry ${seq}. Each service was judged by the terms in force when it was sealed; its page names them.`,
      types.small,
    );
    drawWarranty(sheet, terms);
    drawSchedule(sheet, terms);
    drawSpecifications(sheet, terms);
  });
}

function drawMachine(sheet: Sheet, { record, owner }: PacketContent): void {
  const { machine, identity, opening } = record;
  const { firstUse, recordStarts } = opening;
  const missing = missingWord('identity', record.entries[0]);
  drawBoxes(sheet, 4, [
    { label: 'Machine', value: [machine.modelYear, machine.make, machine.model].filter(Boolean).join(' '), span: 2 },
    { label: 'Kind', value: machine.kind },
    { label: 'Owner', value: owner ?? 'withheld' },
    { label: 'VIN or frame number', value: identity?.vin ?? identity?.frameNumber ?? missing, span: 2 },
    { label: 'Engine number', value: identity?.engineNumber ?? (identity === null ? missing : 'not stated') },
    {
      label: 'First used',
      value: firstUse?.on === undefined ? 'not stated' : formatLocalDate(firstUse.on),
      note: firstUse?.odometer === undefined ? undefined : odometerWords(firstUse.odometer),
    },
    {
      label: 'The record starts',
      value: formatLocalDate(recordStarts.on),
      note: recordStarts.odometer === undefined ? undefined : odometerWords(recordStarts.odometer),
    },
    { label: 'Log', value: record.log.id, span: 3, kind: 'hash' },
  ]);
}

function drawWarranty(sheet: Sheet, { warranty }: TermsBody): void {
  sheet.heading('Warranty');
  if (warranty.length === 0) {
    sheet.paragraph('No warranty terms are sealed.');
    return;
  }
  drawTable(
    sheet,
    [
      { title: 'Warranty', share: 3 },
      { title: 'Starts', share: 1.5 },
      { title: 'Months', share: 1 },
      { title: 'Distance', share: 2 },
      { title: 'Source', share: 3 },
    ],
    warranty.map(({ title, startsOn, months, distances, source }) => [
      title,
      formatLocalDate(startsOn),
      months ?? 'no limit',
      (distances ?? []).map((distance) => formatDistance(distance)).join(', ') || 'no limit',
      sourceWords(source),
    ]),
  );
}

function drawSchedule(sheet: Sheet, { schedule }: TermsBody): void {
  sheet.heading('Schedule');
  drawTable(
    sheet,
    [
      { title: 'Item', share: 2.6 },
      { title: 'Every', share: 2.4 },
      { title: 'First service', share: 1.8 },
      { title: 'Grace', share: 1.3 },
      { title: 'Source', share: 3 },
    ],
    schedule.map(({ title, action, interval, firstService, grace, source }) => [
      `${title}: ${action}`,
      intervalWords(interval),
      intervalWords(firstService),
      intervalWords(grace),
      sourceWords(source),
    ]),
  );
}

function drawSpecifications(sheet: Sheet, { fluidPoints, fasteners, parts }: TermsBody): void {
  if (fluidPoints.length > 0) {
    sheet.heading('Fluids');
    drawTable(
      sheet,
      [
        { title: 'Fluid point', share: 2 },
        { title: 'Wet fill', share: 1.7 },
        { title: 'Dry fill', share: 1.7 },
        { title: 'Grade, standard', share: 2 },
        { title: 'Level', share: 2 },
        { title: 'Source', share: 2.6 },
      ],
      fluidPoints.map((point) => [
        point.title,
        amountsWords(point.wetFill),
        amountsWords(point.dryFill),
        [point.grade, point.standard].filter(Boolean).join(', '),
        [point.levelTemperature, point.levelPosition].filter(Boolean).join(', '),
        sourceWords(point.source),
      ]),
    );
  }
  if (fasteners.length > 0) {
    sheet.heading('Fasteners');
    drawTable(
      sheet,
      [
        { title: 'Fastener', share: 3 },
        { title: 'Torque', share: 3 },
        { title: 'Sequence', share: 2 },
        { title: 'Source', share: 3 },
      ],
      fasteners.map(({ title, bands, sequence, source }) => [
        title,
        bands.map(({ min, max, unit }) => `${min === max ? min : `${min} to ${max}`} ${units[unit].label}`).join(', '),
        sequence ?? '',
        sourceWords(source),
      ]),
    );
  }
  if (parts.length > 0) {
    sheet.heading('Parts');
    drawTable(
      sheet,
      [
        { title: 'Part', share: 3 },
        { title: 'Part numbers', share: 3 },
        { title: 'Quantity', share: 1 },
        { title: 'Source', share: 3 },
      ],
      parts.map(({ title, partNumbers, quantity, source }) => [
        title,
        partNumbers.join(', '),
        quantity,
        sourceWords(source),
      ]),
    );
  }
}
