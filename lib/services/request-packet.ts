import 'server-only';
import { randomInt, randomUUID } from 'node:crypto';
import { z } from 'zod';
import { write, type Transaction } from '@/db/index';
import type { PersonRow } from '@/db/queries/people';
import { countPacketsAskedBy, insertPacket, isPacketNumberTaken, type PacketRow } from '@/db/queries/packets';
import { authorise } from '@/lib/auth/guard';
import { usualScope, type Scope } from '@/lib/domain/scope';
import { storeScope } from '@/lib/domain/stored-scope';
import { WitnessmarkError, invalidInput } from '@/lib/errors';
import { isAcceptableText } from '@/lib/evidence/text';
import { now } from '@/lib/ports/clock';
import { kickPackets } from '@/lib/services/build-packet';
import { openInScope } from '@/lib/services/open-in-scope';
import { scopeFields } from '@/lib/services/scope-input';

const longestPurpose = 200;
/** Each packet holds every picture of the record again, and they are built one at a time for everybody. */
export const mostPacketsWaiting = 5;
export const mostPacketsADay = 50;
const millisecondsInDay = 24 * 60 * 60 * 1000;

export const requestPacketInput = z.object({
  /** Printed on the cover: "a warranty claim on the gearbox". */
  purpose: z
    .string()
    .trim()
    .max(longestPurpose, `Keep the purpose under ${longestPurpose} characters.`)
    .refine((text) => isAcceptableText(text.normalize('NFC')), 'Leave out control and direction characters.')
    .transform((text) => text.normalize('NFC'))
    .default(''),
  ...scopeFields,
});
export type RequestPacketInput = Pick<z.infer<typeof requestPacketInput>, 'purpose'>;

/** Puts a packet in the queue; it is built in the background and its row says how far it is. */
export async function requestPacket(options: {
  person: PersonRow;
  machineId: string;
  input: RequestPacketInput;
  /** What it opens; left out: everything but prices. */
  scope?: Scope;
}): Promise<PacketRow> {
  const { person, machineId, input, scope = usualScope } = options;
  const { purpose } = input;
  await authorise({ person, action: 'share', machine: machineId });
  await refuseTooMany(person);
  await refuseTellingPurpose({ machineId, scope, purpose });
  const packet = await queuePacket({ machineId, by: person.id, purpose, scope });
  kickPackets();
  return packet;
}

async function refuseTooMany(person: PersonRow): Promise<void> {
  const since = new Date(now().getTime() - millisecondsInDay).toISOString();
  const { waiting, sinceThen } = await countPacketsAskedBy(person.id, since);
  if (waiting >= mostPacketsWaiting) {
    throw new WitnessmarkError(
      'too-many-attempts',
      `${waiting} packets you asked for are not built yet. Wait until they are, then ask again.`,
    );
  }
  if (sinceThen >= mostPacketsADay) {
    throw new WitnessmarkError(
      'too-many-attempts',
      `You asked for ${sinceThen} packets within a day. Use the newest, or ask again tomorrow.`,
    );
  }
}

/** The cover would say what the packet is asked to keep closed. */
async function refuseTellingPurpose(options: { machineId: string; scope: Scope; purpose: string }): Promise<void> {
  const { machineId, scope, purpose } = options;
  if (purpose === '' || !(scope.closed.includes('names') || scope.closed.includes('vin'))) return;
  const { spelledOut } = await openInScope({ machineId, scope });
  if (scope.closed.includes('names') && spelledOut.isNaming(purpose)) {
    throw invalidInput({ purpose: 'This names a person, and names stay closed in this packet. Leave the name out.' });
  }
  if (scope.closed.includes('vin') && spelledOut.isIdentifying(purpose)) {
    throw invalidInput({ purpose: 'This names the VIN, which stays closed in this packet. Leave it out.' });
  }
}

/** Makes the row with a number nobody has. Who may ask is decided before this is called. */
export function queuePacket(options: {
  machineId: string;
  by: string;
  purpose: string;
  scope?: Scope;
}): Promise<PacketRow> {
  return write(async (transaction) => {
    const row: PacketRow = {
      id: randomUUID(),
      machineId: options.machineId,
      number: await newNumber(transaction),
      purpose: options.purpose,
      state: 'queued',
      stage: 'Waiting for its turn',
      progress: 0,
      error: null,
      createdBy: options.by,
      createdAt: now().toISOString(),
      finishedAt: null,
      fileSha256: null,
      bytes: null,
      pages: null,
      logSize: null,
      linkId: null,
      scope: storeScope(options.scope ?? usualScope),
    };
    await insertPacket(row, transaction);
    return row;
  });
}

/** Without I, L, O, U, 0 and 1: a number is read out on the telephone. */
const numberAlphabet = '23456789ABCDEFGHJKMNPQRSTVWXYZ';
const fourCharacters = () =>
  Array.from({ length: 4 }, () => numberAlphabet.charAt(randomInt(numberAlphabet.length))).join('');

async function newNumber(transaction: Transaction): Promise<string> {
  for (;;) {
    const number = `WM-${fourCharacters()}-${fourCharacters()}`;
    if (!(await isPacketNumberTaken(number, transaction))) return number;
  }
}
