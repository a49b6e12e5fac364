import 'server-only';
import { z } from 'zod';
import { write } from '@/db/index';
import { countOpenDrafts, draftById, insertDraft } from '@/db/queries/drafts';
import { findEntry } from '@/db/queries/entries';
import { findLogOf } from '@/db/queries/logs';
import type { DraftRow } from '@/db/models/drafts';
import type { PersonRow } from '@/db/models/people';
import { now } from '@/lib/ports/clock';
import { WitnessmarkError, notFound } from '@/lib/errors';
import { authoriseDraftSubject, demandDraft } from './draft-access';

/** Ids minted on a device: UUIDs as `crypto.randomUUID` writes them. */
export const deviceId = z
  .string()
  .regex(/^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/, 'An id is a UUID in lower case.');

/** Worksheets and addenda open on one machine, or receipts on one shelf: every device reads all of them. */
export const mostOpenDrafts = 100;

export const startDraftInput = z.object({
  id: deviceId,
  kind: z.enum(['worksheet', 'receipt', 'addendum']),
  /** A machine for a worksheet or an addendum, a shelf for a receipt. */
  subject: deviceId,
  /** For an addendum: the number of the entry it adds to. */
  refersToSeq: z.number().int().min(0).optional(),
});

/**
 * Opens a worksheet, a receipt or an addendum under the id its device gave it. A repeated call returns the draft as it is, wherever
 * it has been moved since.
 */
export async function startDraft(options: {
  person: PersonRow;
  input: z.infer<typeof startDraftInput>;
}): Promise<{ draft: DraftRow; isNew: boolean }> {
  const { person, input } = options;
  const existing = await draftById(input.id);
  if (existing !== null) {
    const draft = await demandDraft({ person, draftId: input.id });
    if (draft.kind !== input.kind) {
      throw new WitnessmarkError('conflict', `There is already a ${draft.kind} with this id. Start with a fresh one.`);
    }
    return { draft, isNew: false };
  }
  await authoriseDraftSubject({ person, kind: input.kind, subject: input.subject });
  const refersToSeq = input.kind === 'addendum' ? await demandEntry(input) : null;
  return write(async (transaction) => {
    const meanwhile = await draftById(input.id, transaction);
    if (meanwhile !== null) return { draft: meanwhile, isNew: false };
    if ((await countOpenDrafts(input.subject, transaction)) >= mostOpenDrafts) {
      throw new WitnessmarkError(
        'too-large',
        `${mostOpenDrafts} are open here already. Seal or discard some of them first; this one stays on the device.`,
      );
    }
    const at = now().toISOString();
    const draft: DraftRow = {
      id: input.id,
      kind: input.kind,
      subjectId: input.subject,
      createdBy: person.id,
      createdAt: at,
      changedAt: at,
      state: 'open',
      sealedLog: null,
      sealedSeq: null,
      refersToSeq,
    };
    await insertDraft(draft, transaction);
    return { draft, isNew: true };
  });
}

/** The entry an addendum adds to; entries never go away, so it need not be asked again at the seal. */
async function demandEntry({ subject, refersToSeq }: z.infer<typeof startDraftInput>): Promise<number> {
  const log = await findLogOf(subject);
  const entry = log === null || refersToSeq === undefined ? null : await findEntry(log.id, refersToSeq);
  if (entry === null) throw notFound('entry');
  return entry.seq;
}
