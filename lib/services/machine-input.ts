import { z } from 'zod';
import { isLocalDate, isZone, localDateOf } from '@/lib/domain/instants';
import { parseNumber } from '@/lib/domain/units';
import { checkVin } from '@/lib/domain/vin';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import type { Amount, IdentityPart, Odometer, OpeningBody, WarrantyTerm } from '@/lib/evidence/format';
import { normaliseText } from '@/lib/evidence/text';
import type { FieldErrors } from '@/lib/errors';

const distanceUnits = ['[mi_i]', 'km'] as const;

/** One line of text as it may be sealed. */
function line(longest: number) {
  return z
    .string()
    .default('')
    .transform((text, context) => {
      try {
        const clean = normaliseText(text).trim();
        if (clean.length > longest) context.addIssue(`This has ${clean.length} characters; at most ${longest} fit.`);
        return clean;
      } catch (error) {
        if (!(error instanceof EvidenceError)) throw error;
        context.addIssue(error.message);
        return z.NEVER;
      }
    });
}

/** What the form sends: texts as typed. Shared by the form's action and the use case. */
export const machineInput = z.object({
  /** Minted when the form was opened, so that sending it twice sets up one machine. */
  machine: z.guid('Reload the page and fill in the form again.').toLowerCase(),
  make: line(80).refine((text) => text !== '', 'Enter the make, as it stands on the machine.'),
  model: line(80).refine((text) => text !== '', 'Enter the model.'),
  modelYear: line(4).refine((text) => text === '' || /^(19|20)\d\d$/.test(text), 'Enter the year in four digits.'),
  kind: z.string('Choose what kind of machine it is.').min(1, 'Choose what kind of machine it is.').max(60),
  vin: line(40),
  frameNumber: line(40),
  engineNumber: line(40),
  distanceUnit: z.enum(distanceUnits, 'Choose whether its odometer counts miles or kilometres.'),
  timeZone: line(60).refine(isZone, 'Choose the time zone the machine is serviced in.'),
  firstUseOn: line(10),
  firstUseOdometer: line(24),
  why: z.enum(['new', 'bought-used', 'from-paper'], 'Choose where this record starts.'),
  startsOn: line(10),
  startsOdometer: line(24),
  warrantyTitle: line(80),
  warrantyKind: z.enum(['factory', 'extended']).default('factory'),
  warrantyStartsOn: line(10),
  warrantyMonths: line(4),
  warrantyDistance: line(24),
  warrantyUnit: z.enum(distanceUnits).default('[mi_i]'),
});
export type MachineInput = z.output<typeof machineInput>;

export interface ReadMachine {
  identity: IdentityPart;
  vinCheck: 'valid' | 'not checked';
  opening: Omit<OpeningBody, 'make' | 'model' | 'kindOfMachine'>;
  warranty: WarrantyTerm[];
}

type Refuse = (field: keyof MachineInput, sentence: string) => undefined;

function dayOf(field: keyof MachineInput, input: MachineInput, today: string, refuse: Refuse): string | undefined {
  const text = String(input[field]);
  if (text === '') return undefined;
  if (!isLocalDate(text)) return refuse(field, `“${text}” is not a day of the calendar. Enter it like 2026-04-18.`);
  if (text > today) return refuse(field, 'This day is in the future. Enter the day it was.');
  return text;
}

function figureOf(field: keyof MachineInput, input: MachineInput, refuse: Refuse): string | undefined {
  const text = String(input[field]);
  if (text === '') return undefined;
  const number = parseNumber(text);
  if (!number.ok) return refuse(field, number.error);
  if (number.amount.startsWith('-')) return refuse(field, 'This cannot be below zero. Leave out the minus sign.');
  return number.amount;
}

function odometer(value: string | undefined, unit: Odometer['unit']): Odometer | undefined {
  return value === undefined ? undefined : { value, unit, instrument: 0 };
}

function identityOf(input: MachineInput, refuse: Refuse): Pick<ReadMachine, 'identity' | 'vinCheck'> {
  const { vin, frameNumber, engineNumber } = input;
  const identity: IdentityPart = {};
  let vinCheck: ReadMachine['vinCheck'] = 'not checked';
  if (vin === '' && frameNumber === '') refuse('vin', 'Enter the VIN, or the frame number if the machine has no VIN.');
  if (vin !== '') {
    const check = checkVin(vin);
    if (check.error !== undefined) refuse('vin', check.error);
    identity.vin = check.vin;
    vinCheck = check.warnings.length === 0 ? 'valid' : 'not checked';
  }
  if (frameNumber !== '') identity.frameNumber = frameNumber;
  if (engineNumber !== '') identity.engineNumber = engineNumber;
  return { identity, vinCheck };
}

function warrantyOf(input: MachineInput, refuse: Refuse): WarrantyTerm[] {
  const { warrantyTitle, warrantyKind, warrantyStartsOn, warrantyMonths, warrantyDistance, warrantyUnit } = input;
  if ([warrantyTitle, warrantyStartsOn, warrantyMonths, warrantyDistance].every((text) => text === '')) return [];
  if (warrantyTitle === '') refuse('warrantyTitle', 'Name the warranty as its paper does, or clear its other fields.');
  if (!isLocalDate(warrantyStartsOn)) {
    refuse('warrantyStartsOn', 'Enter the day the warranty starts, like 2026-04-18.');
  }
  if (warrantyMonths !== '' && !/^[1-9]\d{0,2}$/.test(warrantyMonths)) {
    refuse('warrantyMonths', 'Enter whole months, such as 24.');
  }
  const distance = figureOf('warrantyDistance', input, refuse);
  if (warrantyMonths === '' && warrantyDistance === '') {
    refuse('warrantyMonths', 'Enter the months or the distance it runs, or both.');
  }
  const distances: Amount[] = distance === undefined ? [] : [{ amount: distance, unit: warrantyUnit }];
  return [
    {
      term: warrantyKind,
      title: warrantyTitle,
      kind: warrantyKind,
      startsOn: warrantyStartsOn,
      ...(warrantyMonths === '' ? {} : { months: warrantyMonths }),
      ...(distances.length === 0 ? {} : { distances }),
      source: { kind: 'owner' },
    },
  ];
}

/**
 * What the form's texts come to, or a sentence for every field that keeps the machine from being set up.
 *
 * @example readMachineInput(input, '2026-04-18T12:00:00.000Z').refused.vin // 'Position 9 is 4, but …'
 */
export function readMachineInput(input: MachineInput, now: string): { machine: ReadMachine; refused: FieldErrors } {
  const refused: FieldErrors = {};
  const refuse: Refuse = (field, sentence) => {
    refused[field] ??= sentence;
    return undefined;
  };
  const today = localDateOf(now, input.timeZone);
  const { distanceUnit: unit, why } = input;
  const firstOn = dayOf('firstUseOn', input, today, refuse);
  const firstOdometer = odometer(figureOf('firstUseOdometer', input, refuse), unit);
  const isNew = why === 'new';
  if (isNew && input.firstUseOn === '') refuse('firstUseOn', 'Enter the day the machine was first used.');
  const startsOn = isNew ? firstOn : dayOf('startsOn', input, today, refuse);
  const startsAt = isNew ? firstOdometer : odometer(figureOf('startsOdometer', input, refuse), unit);
  if (!isNew && input.startsOn === '')
    refuse('startsOn', 'Enter the day this record starts, like the day you bought it.');
  if (!isNew && firstOn !== undefined && startsOn !== undefined && startsOn < firstOn) {
    refuse('startsOn', 'The record cannot start before the machine was first used. Correct one of the two days.');
  }
  if (why === 'bought-used' && startsAt === undefined && input.startsOdometer === '') {
    refuse('startsOdometer', 'Enter the odometer reading on that day: earlier work is “before this record”.');
  }
  const firstUse = { ...(firstOn && { on: firstOn }), ...(firstOdometer && { odometer: firstOdometer }) };
  const opening: ReadMachine['opening'] = {
    ...(input.modelYear === '' ? {} : { modelYear: input.modelYear }),
    ...(Object.keys(firstUse).length === 0 ? {} : { firstUse }),
    recordStarts: { on: startsOn ?? today, ...(startsAt && { odometer: startsAt }), why },
  };
  return { machine: { ...identityOf(input, refuse), opening, warranty: warrantyOf(input, refuse) }, refused };
}
