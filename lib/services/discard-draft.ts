import 'server-only';
import { write } from '@/db/index';
import { closeDraft, draftById } from '@/db/queries/drafts';
import type { PersonRow } from '@/db/models/people';
import { notFound } from '@/lib/errors';
import { now } from '@/lib/ports/clock';
import { demandDraft, refuseClosed } from './draft-access';

/** Takes a draft out of sight. Its changes and pictures stay stored; nothing sealed can be discarded. */
export async function discardDraft(options: { person: PersonRow; draftId: string }): Promise<void> {
  await demandDraft(options);
  await write(async (transaction) => {
    const draft = await draftById(options.draftId, transaction);
    if (draft === null) throw notFound('draft');
    if (draft.state === 'discarded') return;
    const isClosed = await closeDraft(draft.id, { state: 'discarded' }, now().toISOString(), transaction);
    if (!isClosed) throw refuseClosed(draft);
  });
}
