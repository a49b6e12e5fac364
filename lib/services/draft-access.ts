import 'server-only';
import { draftById } from '@/db/queries/drafts';
import type { DraftRow } from '@/db/models/drafts';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';
import { WitnessmarkError, notFound } from '@/lib/errors';

/** May this person write in worksheets and addenda of this machine, or in receipts of this shelf? Throws "not found" if not. */
export async function authoriseDraftSubject(options: {
  person: PersonRow;
  kind: DraftRow['kind'];
  subject: string;
}): Promise<void> {
  const { person, kind, subject } = options;
  if (kind === 'receipt') await authorise({ person, action: 'edit-shelf', shelf: subject });
  else await authorise({ person, action: 'edit-worksheet', machine: subject });
}

/** The draft, for a person who may write in it. */
export async function demandDraft(options: { person: PersonRow; draftId: string }): Promise<DraftRow> {
  const draft = await draftById(options.draftId);
  if (draft === null) throw notFound('draft');
  await authoriseDraftSubject({ person: options.person, kind: draft.kind, subject: draft.subjectId });
  return draft;
}

/** Why a draft that is no longer open takes no change. */
export function refuseClosed(draft: DraftRow): WitnessmarkError {
  if (draft.state === 'sealed') {
    const sentences = {
      worksheet: `This worksheet is already sealed as entry ${draft.sealedSeq}. What is missing can be added there as an addendum.`,
      receipt: `This receipt is already sealed as entry ${draft.sealedSeq} of the shelf.`,
      addendum: `This addendum is already sealed as entry ${draft.sealedSeq}. What is missing can be added as another one.`,
    };
    return new WitnessmarkError('already-sealed', sentences[draft.kind]);
  }
  return new WitnessmarkError('conflict', `This ${draft.kind} was discarded. Start a new one.`);
}
