import 'server-only';
import { invitationsOfMachine } from '@/db/queries/invitations';
import { waitingStamps } from '@/db/queries/lots';
import type { MachineRow } from '@/db/models/machines';
import type { CheckKey } from '@/lib/domain/checks';
import { formatInstant, formatLocalDate, localDateOf } from '@/lib/domain/instants';
import { now } from '@/lib/ports/clock';
import type { SealedHistory } from './read-history';

export interface Waiting {
  kind: 'invitation' | 'time-stamp' | 'gap';
  /** The entry it is about. */
  seq: number;
  title: string;
  note: string;
}

/** Gaps of older entries are history; those of the latest can still be mended by an addendum. */
const latestServices = 3;
/** A missing paper can be added; work done late stays late. */
const mendable = new Set<string>(['receipts', 'grade-and-part-number', 'odometer-photographed'] satisfies CheckKey[]);

/** What waits for somebody: shops that were asked, time stamps to come, gaps an addendum can mend. */
export async function whatWaits(options: { machine: MachineRow; history: SealedHistory }): Promise<Waiting[]> {
  const { machine, history } = options;
  const at = now().toISOString();
  const invited = (await invitationsOfMachine(machine.id))
    .filter((one) => one.withdrawnAt === null && one.answeredAt === null && one.expiresAt > at)
    .map((one): Waiting => {
      const asked = formatLocalDate(localDateOf(one.createdAt, machine.timeZone));
      const read = one.openedAt === null ? 'Not opened yet.' : 'The invitation was opened.';
      return {
        kind: 'invitation',
        seq: one.seq,
        title: `${one.email} has been asked to countersign entry ${one.seq}.`,
        note: `Asked on ${asked}. ${read}`,
      };
    });
  const stamps = (await waitingStamps(history.log)).map((job): Waiting => {
    const next = formatInstant(job.nextTryAt, machine.timeZone);
    return {
      kind: 'time-stamp',
      seq: job.size - 1,
      title: `Entry ${job.size - 1} waits for its time stamp.`,
      note: job.attempts === 0 ? 'It is being fetched.' : `The authority did not answer; next try ${next}.`,
    };
  });
  const gaps = history.services.slice(-latestServices).flatMap(({ seq, body }) =>
    body.checks
      .filter(({ key, result }) => result === 'gap' && mendable.has(key))
      .map(({ detail }): Waiting => ({
        kind: 'gap',
        seq,
        title: `Entry ${seq}: ${detail}`,
        note: 'An addendum can add what is missing; the entry stays as it is.',
      })),
  );
  return [...invited, ...stamps, ...gaps.reverse()];
}
