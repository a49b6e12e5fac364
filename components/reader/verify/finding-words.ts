import { confirmedWords } from '@/components/entry/words';
import { isPersonId } from '@/lib/domain/person-id';
import { formatInstant, formatLocalMoment } from '@/lib/domain/instants';
import { formatAmount, formatDistance, isDecimalString, isUnitCode } from '@/lib/domain/units';
import type { EntryFinding } from '@/lib/evidence/finding';
import type { EntryKind, LocalMoment } from '@/lib/evidence/format';

export interface EntryWords {
  title: string;
  /** What the entry says, a sentence or figure each. Everything in it is somebody's own words. */
  says: string[];
  gaps: string[];
}

export const kindWords: Record<EntryKind, string> = {
  opening: 'Record opened',
  service: 'Service',
  terms: 'Terms',
  reading: 'Odometer reading',
  addendum: 'Addendum',
  strike: 'Strike',
  countersignature: 'Countersignature',
  key: 'Key of a signer',
  signature: 'Signature',
  handover: 'Handover',
  purchase: 'Purchase',
  disposal: 'Disposal',
  correction: 'Correction',
};

const capacities: Record<string, string> = {
  'did-the-work': 'did the work',
  inspected: 'inspected the finished work',
  'was-present': 'was present',
  'checked-papers': 'checked the papers only',
};

type Loose = Record<string, unknown>;
/** Anybody can write a file, so nothing is taken to be of its form. */
const looseOf = (value: unknown): Loose =>
  typeof value === 'object' && value !== null && !Array.isArray(value) ? (value as Loose) : {};
const listOf = (value: unknown): Loose[] => (Array.isArray(value) ? value.map(looseOf) : []);
const textOf = (value: unknown): string => (typeof value === 'string' ? value : '');
const labelled = (label: string, text: string): string => (label === '' || text === '' ? text : `${label}: ${text}`);
const joined = (...parts: string[]): string => parts.filter((part) => part !== '').join(', ');

function amountOf({ amount, unit }: Loose): string {
  if (typeof amount !== 'string' || typeof unit !== 'string') return '';
  return isDecimalString(amount) && isUnitCode(unit) ? formatAmount({ amount, unit }) : `${amount} ${unit}`;
}

function odometerOf(value: unknown): string {
  const { value: figure, unit } = looseOf(value);
  if (typeof figure !== 'string' || typeof unit !== 'string') return '';
  return isDecimalString(figure) && isUnitCode(unit) ? formatDistance({ value: figure, unit }) : `${figure} ${unit}`;
}

/** A claimed moment as written; one that is no date is shown as it stands. */
export function momentWords(moment: LocalMoment | undefined): string {
  if (moment === undefined) return '';
  try {
    return `${formatLocalMoment(moment)} (${moment.zone})`;
  } catch {
    return joined(textOf(moment.date), textOf(moment.time), textOf(moment.zone));
  }
}

/** A server's instant, in UTC since a file names no zone of its own; one that is none is shown as it stands. */
export function instantWords(instant: string): string {
  try {
    return `${formatInstant(instant, 'UTC')} UTC`;
  } catch {
    return instant;
  }
}

/** An entry in words for whoever decides on it, taken from its opened parts alone. */
export function entryWords(entry: EntryFinding): EntryWords {
  const part = (name: string) => entry.openedParts.find((one) => one.name === name)?.value;
  const kind = entry.kind === null ? 'A line that cannot be read' : kindWords[entry.kind];
  const body = looseOf(part('body'));
  const author = looseOf(part('author'));
  const by = author.name === undefined ? '' : `By ${joined(textOf(author.name), textOf(author.role))}.`;
  const notes = textOf(looseOf(part('notes')).text);
  const said = bodyWords(entry.kind, body, part);
  const gaps = listOf(body.checks)
    .filter(({ result }) => result === 'gap')
    .map(({ detail }) => textOf(detail));
  return {
    title: said.title || kind,
    says: [...said.says, notes, by].filter((line) => line !== ''),
    gaps: gaps.filter((line) => line !== ''),
  };
}

function bodyWords(
  kind: EntryKind | null,
  body: Loose,
  part: (name: string) => unknown,
): { title: string; says: string[] } {
  switch (kind) {
    case 'service':
      return { title: textOf(body.title), says: serviceWords(body) };
    case 'opening': {
      const identity = looseOf(part('identity'));
      const name = joined([body.modelYear, body.make, body.model].map(textOf).filter(Boolean).join(' '));
      const number = textOf(identity.vin) || textOf(identity.frameNumber);
      return { title: '', says: [joined(name || textOf(body.name), number)] };
    }
    case 'countersignature': {
      const shop = textOf(looseOf(body.shop).name);
      const capacity = capacities[textOf(body.capacity)] ?? textOf(body.capacity);
      const inviter = textOf(body.invitedBy);
      const invited = inviter === '' ? '' : `Invited by ${isPersonId(inviter) ? 'the owner' : inviter}.`;
      const confirmedBy = textOf(looseOf(body.shop).confirmedBy);
      const since = textOf(looseOf(body.shop).accountSince).slice(0, 10);
      const known =
        `Account of the shop since ${since || 'a day not stated'}; ` +
        `${confirmedWords(confirmedBy === '' ? null : confirmedBy)}.`;
      return {
        title: shop === '' ? '' : `Countersigned by ${shop}, which ${capacity}`,
        says: [textOf(body.statement), invited, known],
      };
    }
    case 'purchase': {
      const bought = looseOf(body.boughtOn) as unknown as LocalMoment;
      const lines = listOf(body.lines).map((line) =>
        joined(textOf(line.product), textOf(line.grade), textOf(line.partNumber)),
      );
      const supplier = textOf(looseOf(part('supplier')).name);
      const on =
        bought.date === undefined ? '' : `Bought ${momentWords(bought)}${supplier === '' ? '' : ` at ${supplier}`}.`;
      return { title: lines.join('; '), says: [on] };
    }
    case 'terms':
      return {
        title: '',
        says: [
          `Schedule of ${listOf(body.schedule).length} items, specifications and warranty terms by which later services are judged.`,
        ],
      };
    case 'reading':
      return { title: '', says: [odometerOf(body.odometer)] };
    default:
      return { title: '', says: [textOf(body.reason), textOf(body.text), textOf(body.why)] };
  }
}

function serviceWords(body: Loose): string[] {
  const done = listOf(body.tasks).flatMap((task) => [
    ...listOf(task.fills).map((fill) => {
      const amounts = listOf(fill.amounts).map(amountOf).join(' + ');
      return labelled(textOf(fill.pointTitle), joined(amounts, textOf(fill.product), textOf(fill.grade)));
    }),
    ...listOf(task.torques).map((torque) => labelled(textOf(torque.fastenerTitle), amountOf(torque))),
    ...listOf(task.parts).map((one) => joined(textOf(one.name), textOf(one.partNumber))),
  ]);
  const odometer = odometerOf(body.odometer);
  return [odometer === '' ? '' : `At ${odometer}.`, ...done, textOf(body.statement)];
}
