import 'server-only';
import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import { write } from '@/db/index';
import { findEntry } from '@/db/queries/entries';
import { countInvitationsBy, insertInvitation } from '@/db/queries/invitations';
import { findLogOf } from '@/db/queries/logs';
import { machines } from '@/db/models/machines';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';
import { newSecretAddress } from '@/lib/auth/secret-address';
import { env } from '@/lib/env';
import { WitnessmarkError, invalidInput, notFound } from '@/lib/errors';
import { paths } from '@/lib/paths';
import { now } from '@/lib/ports/clock';
import { sendMail } from '@/lib/ports/mail';
import { demandStanding } from '@/lib/services/demand-standing';
import { recordMemory } from '@/lib/services/record-memory';

const daysOpen = 30;
const mostADay = 20;
const millisecondsInDay = 24 * 60 * 60 * 1000;

export const invitationInput = z.object({
  email: z.email('Write one e-mail address, like workshop@halyard.example.').transform((email) => email.toLowerCase()),
  message: z.string().trim().max(1000, 'Keep the message under 1,000 characters.').default(''),
});

/**
 * Asks a shop by e-mail to countersign one service entry. The mail holds the only copy of the secret address, and the
 * record's size and root, so that the shop has a memory of the record too.
 */
export async function inviteCountersigner(options: {
  person: PersonRow;
  machineId: string;
  seq: number;
  input: z.infer<typeof invitationInput>;
}): Promise<{ id: string }> {
  const { person, machineId, seq, input } = options;
  await authorise({ person, action: 'share', machine: machineId });
  const [machine, log] = await Promise.all([machines.find({ id: machineId }), findLogOf(machineId)]);
  const entry = log === null ? null : await findEntry(log.id, seq);
  if (machine === null || log === null || entry === null) throw notFound('entry');
  if (entry.kind !== 'service') {
    throw new WitnessmarkError('conflict', 'Only a service can be countersigned; this entry is none.');
  }
  await demandStanding({ log: log.id, seq });
  if (input.email === person.email) {
    throw invalidInput({ email: 'This is your own address. A countersignature must come from somebody else.' });
  }
  const instant = now();
  const since = new Date(instant.getTime() - millisecondsInDay).toISOString();
  // By person, not by machine: machines cost nothing, and each invitation is a mail to somebody else.
  if ((await countInvitationsBy(person.id, since)) >= mostADay) {
    throw new WitnessmarkError('too-many-attempts', `${mostADay} shops were asked within a day. Try again tomorrow.`);
  }

  const { token, tokenHash } = newSecretAddress();
  const id = randomUUID();
  await write((transaction) =>
    insertInvitation(
      {
        id,
        logId: log.id,
        seq,
        machineId,
        email: input.email,
        tokenHash,
        invitedBy: person.id,
        message: input.message,
        createdAt: instant.toISOString(),
        expiresAt: new Date(instant.getTime() + daysOpen * millisecondsInDay).toISOString(),
        openedAt: null,
        remindedAt: null,
        withdrawnAt: null,
        answeredAt: null,
        answeredBy: null,
        shopId: null,
        outcome: null,
        declineReason: null,
        answerSeq: null,
      },
      transaction,
    ),
  );
  const name = [machine.modelYear, machine.make, machine.model].filter(Boolean).join(' ');
  await sendMail({
    to: input.email,
    subject: `Please countersign entry ${seq} of the record of a ${name}`,
    text: [
      `${person.name} keeps the service record of a ${name} with Witnessmark and asks you to read entry ${seq}.`,
      'You can countersign it, saying in which capacity you vouch for it, or decline. It takes about a minute.',
      ...(input.message === '' ? [] : [`${person.name} writes:`, input.message]),
      `Read it here, until ${new Date(instant.getTime() + daysOpen * millisecondsInDay).toISOString().slice(0, 10)}:`,
      env.url + paths.invitation(token),
      'Sign only what you know to be so. If you know nothing of this, ignore this mail; nothing happens.',
      await recordMemory(log.id),
    ].join('\n\n'),
  });
  return { id };
}
