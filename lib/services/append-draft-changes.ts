import 'server-only';
import { z } from 'zod';
import { write, type Transaction } from '@/db/index';
import {
  changesSince,
  countChanges,
  countCharacters,
  draftById,
  insertChanges,
  knownChangeIds,
} from '@/db/queries/drafts';
import type { DraftChangeRow } from '@/db/models/drafts';
import type { PersonRow } from '@/db/models/people';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import { normaliseText } from '@/lib/evidence/text';
import { WitnessmarkError, notFound } from '@/lib/errors';
import { now } from '@/lib/ports/clock';
import { demandDraft, refuseClosed } from './draft-access';
import { changeView, type ChangeView } from './read-draft';
import { deviceId } from './start-draft';

export const mostChangesAtOnce = 500;
export const mostChangesOfADraft = 20_000;
/** A draft is read whole and often. Real ones stay under a hundredth of this. */
export const mostCharactersOfADraft = 4_000_000;
export const longestFieldPath = 200;
export const longestValue = 8_000;

/** How far a device's clock may run ahead before its times are not believed. */
export const toleratedLeadMilliseconds = 2 * 60_000;

/** Steps of letters, digits, hyphens and underscores parted by `/`: `tasks/<id>/fills/<id>/product`. */
const fieldForm = /^[A-Za-z0-9][A-Za-z0-9_-]{0,63}(?:\/[A-Za-z0-9][A-Za-z0-9_-]{0,63}){0,9}$/;

export const appendChangesInput = z.object({
  changes: z
    .array(
      z.object({
        id: deviceId,
        field: z.string().max(2_000),
        value: z.string().max(200_000).nullable(),
        deviceAt: z.iso.datetime({ precision: 3 }),
      }),
    )
    .max(mostChangesAtOnce, `Send at most ${mostChangesAtOnce} changes at once.`),
});
/** Server time of the last change a device was given; what is no instant asks for everything. */
export const sinceInput = z.iso.datetime({ precision: 3 }).optional().catch(undefined);

export interface AppendedChanges {
  accepted: string[];
  /** A refused change stays on the device with the sentence; the others go on. */
  refused: { id: string; field: string; sentence: string }[];
  /** What arrived at or after `since` from anywhere, without what was just sent unless its time was corrected. */
  changes: ChangeView[];
  /** Server time to give as `since` next time. */
  at: string;
}

type Change = z.infer<typeof appendChangesInput>['changes'][number];

function judge(change: Change): { value: string | null } | { sentence: string } {
  if (change.field.length > longestFieldPath || !fieldForm.test(change.field)) {
    return { sentence: 'This field has a name no worksheet or receipt knows. Please reload the page.' };
  }
  if (change.value === null) return { value: null };
  if (change.value.length > longestValue) {
    return { sentence: `This text has ${change.value.length} characters; at most ${longestValue} can be kept.` };
  }
  try {
    return { value: normaliseText(change.value) };
  } catch (error) {
    if (error instanceof EvidenceError) return { sentence: error.message };
    throw error;
  }
}

/**
 * Device times by change id, none ahead of the server's by more than the tolerance: the last writer wins by device
 * time, so a change from next year would otherwise win over everybody's for a year. Those too far ahead keep their
 * order, a millisecond apart.
 */
function believedTimes(changes: readonly Change[], at: Date): Map<string, string> {
  const latest = at.getTime() + toleratedLeadMilliseconds;
  const ahead = changes
    .filter(({ deviceAt }) => Date.parse(deviceAt) > latest)
    .sort((a, b) => Date.parse(a.deviceAt) - Date.parse(b.deviceAt) || (a.id < b.id ? -1 : 1));
  return new Map([
    ...changes.map(({ id, deviceAt }) => [id, deviceAt] as const),
    ...ahead.map(({ id }, index) => [id, new Date(latest + 1 + index).toISOString()] as const),
  ]);
}

/** Adds changes to an open draft. Repeating a call adds nothing and is answered in the same way. */
export async function appendDraftChanges(options: {
  person: PersonRow;
  draftId: string;
  input: z.infer<typeof appendChangesInput> & { since?: string | undefined };
}): Promise<AppendedChanges> {
  const { person, draftId, input } = options;
  await demandDraft({ person, draftId });
  return write(async (transaction) => {
    const draft = await draftById(draftId, transaction);
    if (draft === null) throw notFound('draft');
    const sent = new Map(input.changes.map((change) => [change.id, change]));
    const known = await knownChangeIds(draftId, [...sent.keys()], transaction);
    const fresh = [...sent.values()].filter((change) => !known.has(change.id));
    // A retry of what was stored before the seal is still only a retry.
    if (draft.state !== 'open' && fresh.length > 0) throw refuseClosed(draft);
    if ((await countChanges(draftId, transaction)) + fresh.length > mostChangesOfADraft) {
      throw new WitnessmarkError(
        'too-large',
        `A draft keeps at most ${mostChangesOfADraft} changes. Seal this one and go on in a new one.`,
      );
    }
    const instant = now();
    const at = instant.toISOString();
    const times = believedTimes(fresh, instant);
    const rows: DraftChangeRow[] = [];
    const refused: AppendedChanges['refused'] = [];
    for (const change of fresh) {
      const { id, field } = change;
      const judged = judge(change);
      const deviceAt = times.get(id) ?? at;
      if ('sentence' in judged) refused.push({ id, field, sentence: judged.sentence });
      else rows.push({ draftId, id, field, value: judged.value, deviceAt, serverAt: at, personId: person.id });
    }
    await demandRoom(draftId, rows, transaction);
    await insertChanges(rows, at, transaction);
    const arrived = await changesSince(draftId, input.since ?? '', transaction);
    const isNews = (row: DraftChangeRow) => {
      const own = sent.get(row.id);
      return own === undefined || Date.parse(own.deviceAt) > Date.parse(row.deviceAt);
    };
    return {
      accepted: [...known, ...rows.map((row) => row.id)],
      refused,
      changes: arrived.filter(isNews).map(changeView),
      at,
    };
  });
}

async function demandRoom(draftId: string, rows: DraftChangeRow[], transaction: Transaction): Promise<void> {
  if (rows.length === 0) return;
  const added = rows.reduce((total, { value }) => total + (value?.length ?? 0), 0);
  if ((await countCharacters(draftId, transaction)) + added <= mostCharactersOfADraft) return;
  throw new WitnessmarkError(
    'too-large',
    `A draft keeps at most ${mostCharactersOfADraft} characters, counting earlier versions. Seal this one and go on in a new one.`,
  );
}
