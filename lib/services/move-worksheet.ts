import 'server-only';
import { z } from 'zod';
import { write } from '@/db/index';
import { draftById, moveDraft } from '@/db/queries/drafts';
import type { PersonRow } from '@/db/models/people';
import { standingOf } from '@/lib/auth/guard';
import { WitnessmarkError, notFound } from '@/lib/errors';
import { now } from '@/lib/ports/clock';
import { authoriseDraftSubject, demandDraft, refuseClosed } from './draft-access';
import { draftView, type DraftView } from './read-draft';
import { deviceId } from './start-draft';

export const moveWorksheetInput = z.object({ subject: deviceId });

/**
 * Moves a worksheet begun on the wrong machine to the right one, until it is sealed. Throws `forbidden` to a helper who
 * did not begin it.
 */
export async function moveWorksheet(options: {
  person: PersonRow;
  draftId: string;
  input: z.infer<typeof moveWorksheetInput>;
}): Promise<DraftView> {
  const { person, draftId, input } = options;
  const { kind, subjectId, createdBy } = await demandDraft({ person, draftId });
  if (kind === 'receipt') throw new WitnessmarkError('conflict', 'A receipt stays on the shelf it was begun on.');
  if (kind === 'addendum') throw new WitnessmarkError('conflict', 'An addendum stays with the entry it adds to.');
  await authoriseDraftSubject({ person, kind, subject: input.subject });
  // Moved away, it is out of the owner's sight: a helper may not take what others wrote along.
  const { machine } = await standingOf(person, { machine: subjectId });
  if (machine !== 'owner' && createdBy !== person.id) {
    throw new WitnessmarkError(
      'forbidden',
      'Only an owner of the machine, or whoever began this worksheet, can move it to another machine.',
    );
  }
  return write(async (transaction) => {
    const draft = await draftById(draftId, transaction);
    if (draft === null) throw notFound('draft');
    if (draft.state !== 'open') throw refuseClosed(draft);
    const at = now().toISOString();
    await moveDraft(draftId, input.subject, at, transaction);
    return draftView({ ...draft, subjectId: input.subject, changedAt: at });
  });
}
