import 'server-only';
import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import { write } from '@/db/index';
import type { PersonRow } from '@/db/models/people';
import {
  countAsked,
  countAskedBy,
  countAskedOf,
  insertKeeper,
  keepersOfMachine,
} from '@/db/queries/checkpoint-keepers';
import { findLogOf } from '@/db/queries/logs';
import { authorise } from '@/lib/auth/guard';
import { env } from '@/lib/env';
import { invalidInput, notFound, WitnessmarkError } from '@/lib/errors';
import { paths } from '@/lib/paths';
import { now } from '@/lib/ports/clock';
import { sendMail } from '@/lib/ports/mail';
import { keeperToken } from '@/lib/services/keeper-address';
import { recordMemory } from '@/lib/services/record-memory';

export const mostKeepersOfAMachine = 5;
/** Whoever does not answer, or has stopped it, is not asked about the same machine again and again. */
const mostAskedInAQuarter = 2;
const mostAskedADay = 10;
/** By everybody together, about all machines: nobody's mailbox is to be filled from here. */
const mostAskedOfAnAddressAWeek = 3;
const millisecondsInDay = 24 * 60 * 60 * 1000;

export const keeperInput = z.object({
  email: z
    .email('Write one e-mail address, like keeper@halyard.example.')
    .max(254, 'This address is too long.')
    .transform((email) => email.toLowerCase()),
});

/**
 * Asks an address, once and by mail, whether it wants to be mailed each new checkpoint of a machine's record. Nothing
 * more is sent there until somebody who reads its mail says yes.
 */
export async function askCheckpointKeeper(options: {
  person: PersonRow;
  machineId: string;
  input: z.infer<typeof keeperInput>;
}): Promise<void> {
  const { person, machineId, input } = options;
  await authorise({ person, action: 'share', machine: machineId });
  const log = await findLogOf(machineId);
  if (log === null) throw notFound('machine');
  const instant = now();
  const since = (days: number) => new Date(instant.getTime() - days * millisecondsInDay).toISOString();
  const id = randomUUID();
  const { token, tokenHash } = keeperToken(id);
  await write(async (transaction) => {
    const present = await keepersOfMachine(machineId, { transaction });
    if (present.some(({ email }) => email === input.email)) {
      throw invalidInput({ email: 'This address was asked already. It stands in the list.' });
    }
    if (present.length >= mostKeepersOfAMachine) {
      throw invalidInput({ email: `A machine has at most ${mostKeepersOfAMachine} keepers. Take one away first.` });
    }
    if ((await countAsked(machineId, input.email, since(90), { transaction })) >= mostAskedInAQuarter) {
      throw invalidInput({ email: 'This address was asked twice within three months. Choose another.' });
    }
    if ((await countAskedOf(input.email, since(7), { transaction })) >= mostAskedOfAnAddressAWeek) {
      throw invalidInput({ email: 'This address cannot be asked now. Choose another, or try again in a week.' });
    }
    if ((await countAskedBy(person.id, since(1), { transaction })) >= mostAskedADay) {
      throw new WitnessmarkError('too-many-attempts', `${mostAskedADay} addresses were asked within a day. Try again tomorrow.`); // prettier-ignore
    }
    const row = { id, machineId, email: input.email, tokenHash, addedBy: person.id };
    await insertKeeper({ ...row, addedAt: instant.toISOString(), confirmedAt: null, endedAt: null }, transaction);
  });
  const page = `${env.url}${paths.keeper(token)}`;
  await sendMail({
    to: input.email,
    subject: 'Will you keep checkpoints of a service record?',
    text: [
      'The owner of a vehicle keeps its service record with Witnessmark, and asks you to keep its checkpoints: after each ' +
        'new entry a short mail with the record’s length and root, and nothing of what the entry says. If the record is ' +
        'ever rewritten, your mails contradict it.',
      `If you want to, open this page and press its button:\n${page}`,
      'If not, do nothing: no other mail is sent to this address about it. The same page stops the mails later.',
      await recordMemory(log.id),
    ].join('\n\n'),
    unsubscribe: `${env.url}${paths.api.keeperStop(token)}`,
  });
}
