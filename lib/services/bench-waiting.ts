import 'server-only';
import { invitationsOfMachine } from '@/db/queries/invitations';
import { waitingStamps } from '@/db/queries/lots';
import type { StampJobRow } from '@/db/models/logs';
import type { MachineRow } from '@/db/models/machines';
import type { CheckKey } from '@/lib/domain/checks';
import { formatInstant, formatLocalDate, localDateOf } from '@/lib/domain/instants';
import { now } from '@/lib/ports/clock';
import { authorities } from '@/lib/ports/time-stamp-authority/authorities';
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
  const jobs = await waitingStamps(history.log);
  const stamps = authorities().flatMap(({ name, isOwn }) =>
    stampsToCome({
      jobs: jobs.filter(({ authority }) => authority === name),
      from: isOwn ? 'this installation’s own test authority' : name,
      zone: machine.timeZone,
    }),
  );
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

/** One line an authority, however many entries wait for it. */
function stampsToCome({ jobs, from, zone }: { jobs: StampJobRow[]; from: string; zone: string }): Waiting[] {
  const [first, last] = [jobs[0], jobs.at(-1)];
  if (first === undefined || last === undefined) return [];
  const seq = last.size - 1;
  const title =
    jobs.length === 1
      ? `Entry ${seq} waits for its time stamp.`
      : `${jobs.length} entries, the last of them entry ${seq}, wait for their time stamps.`;
  const failed = jobs
    .filter(({ attempts }) => attempts > 0)
    .toSorted((a, b) => a.nextTryAt.localeCompare(b.nextTryAt))[0];
  const note =
    failed === undefined
      ? `It is being fetched from ${from}.`
      : `${from} gave none so far; next try ${formatInstant(failed.nextTryAt, zone)}. The entries are sealed all the same.`;
  return [{ kind: 'time-stamp', seq, title, note }];
}
