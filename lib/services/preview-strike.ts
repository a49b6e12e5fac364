import 'server-only';
import { drawsOfEntries } from '@/db/queries/lots';
import { machineById } from '@/db/queries/machines';
import type { PersonRow } from '@/db/models/people';
import { formatAmount, isUnitCode } from '@/lib/domain/units';
import { notFound } from '@/lib/errors';
import type { ServiceBody } from '@/lib/evidence/format';
import { logOfOwner, type LogSubject } from './log-of-owner';
import { openedPart } from './opened-part';
import { historyOf } from './read-history';
import { usesOf, type LotUse } from './read-shelf-page';
import { strikeEffect, type StrikeEffect } from './strike-effect';
import { whatIsDue } from './what-is-due';

export interface StrikePreview {
  seq: number;
  kind: string;
  /** Why it cannot be struck; then nothing else matters. */
  refusal: string | null;
  /** Entries that stand again, when a strike is struck. */
  standingAgain: number[];
  /** What it did on the schedule, and when that falls due then; of terms, whatever changes. */
  due: { title: string; before: string; after: string }[];
  /** What goes back to its lot, and what is taken from one again. */
  returned: string[];
  takenAgain: string[];
  countersigned: boolean;
  /** The terms that hold afterwards, if that changes. */
  termsAfter: number | null;
  /** Entries that use what a purchase brought; of machines not shared with the person only the number is told. */
  uses: LotUse[];
}

/** What striking one entry would do, before anybody does it. For owners only. */
export async function previewStrike(options: {
  person: PersonRow;
  subject: LogSubject;
  seq: number;
}): Promise<StrikePreview> {
  const { person, subject, seq } = options;
  const log = await logOfOwner({ person, subject });
  const effect = await strikeEffect({ log, seq });
  const { target, refusal, withdrawn, standingAgain, lines, drawnFrom } = effect;
  return {
    seq,
    kind: target.entry.kind,
    refusal,
    standingAgain: standingAgain.map(({ entry }) => entry.seq),
    ...('machine' in subject ? await machineEffects(subject.machine, effect) : { due: [], termsAfter: null }),
    returned: await drawWords(log.id, withdrawn),
    takenAgain: await drawWords(log.id, standingAgain),
    countersigned: lines.some(
      ({ entry }) => entry.kind === 'countersignature' && withdrawn.some((one) => one.entry.seq === entry.refersToSeq),
    ),
    uses: drawnFrom.length === 0 ? [] : (await usesOf(log.id, { person, seq })).filter(({ isStruck }) => !isStruck),
  };
}

async function machineEffects(machineId: string, { lines, linesAfter, withdrawn, standingAgain }: StrikeEffect) {
  const machine = await machineById(machineId);
  if (machine === null) throw notFound('machine');
  const [before, after] = [historyOf('', lines), historyOf('', linesAfter)];
  const earlier = new Map(whatIsDue(machine, before).map(({ item, words }) => [item, words]));
  // A reading less moves every forecast by some days; listed is only what the work itself was about.
  const done = itemsOf([...withdrawn, ...standingAgain]);
  const hasOtherTerms = before.termsSeq !== after.termsSeq;
  const due = whatIsDue(machine, after).flatMap(({ item, title, words }) => {
    const was = earlier.get(item);
    return was === words || !(hasOtherTerms || done.has(item))
      ? []
      : [{ title, before: was ?? 'not in the schedule', after: words }];
  });
  return { due, termsAfter: hasOtherTerms ? after.termsSeq : null };
}

function itemsOf(lines: StrikeEffect['withdrawn']): Set<string> {
  const bodies = lines.flatMap((line) =>
    line.entry.kind === 'service' ? (openedPart<ServiceBody>(line, 'body') ?? []) : [],
  );
  const tasks = bodies.flatMap((body) => body.tasks);
  return new Set(tasks.flatMap(({ scheduleItem, scheduleItems }) => [scheduleItem ?? [], scheduleItems ?? []].flat()));
}

/** `4.25 US qt of Fernhill V-Twin 20W-50, lot 3`, for every draw of these entries. */
async function drawWords(logId: string, lines: StrikeEffect['withdrawn']): Promise<string[]> {
  const seqs = lines.map(({ entry }) => entry.seq);
  const products = new Map(
    lines.flatMap((line) => {
      const body = line.entry.kind === 'service' ? openedPart<ServiceBody>(line, 'body') : undefined;
      const draws = body?.tasks.flatMap(({ fills, parts }) => [...fills, ...parts].flatMap((use) => use.draws)) ?? [];
      return draws.map(({ purchase, line: lot, product }) => [`${purchase.seq}:${lot}`, product] as const);
    }),
  );
  const rows = seqs.length === 0 ? [] : await drawsOfEntries(logId, seqs);
  return rows.flatMap(({ purchaseSeq, line, amount, unit }) =>
    isUnitCode(unit)
      ? [
          `${formatAmount({ amount, unit })} of ${products.get(`${purchaseSeq}:${line}`) ?? 'what was bought'}, lot ${purchaseSeq}`,
        ]
      : [],
  );
}
