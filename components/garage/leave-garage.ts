import type { DraftStore, KeptDraft } from './draft-store';

async function hasUnsent(store: DraftStore, draft: KeptDraft): Promise<boolean> {
  const [changes, files] = await Promise.all([store.readChanges(draft.id), store.readFiles(draft.id)]);
  return changes.some(({ isSent }) => !isSent) || files.some(({ state }) => state === 'waiting');
}

/** How many drafts hold something only this device has: what to ask about before signing out. */
export async function countUnsentDrafts(store: DraftStore): Promise<number> {
  const drafts = await store.readDrafts();
  const unsent = await Promise.all(drafts.map((draft) => hasUnsent(store, draft)));
  return unsent.filter(Boolean).length;
}

/**
 * Clears this device at sign-out: the picture of the garage and every draft the server has whole. What was never sent
 * stays until its person signs in again, unless they chose to delete it.
 */
export async function leaveGarage(store: DraftStore, unsent: 'keep' | 'delete'): Promise<void> {
  await store.deleteNote('garage');
  for (const draft of await store.readDrafts()) {
    if (unsent === 'keep' && (await hasUnsent(store, draft))) continue;
    await store.deleteDraft(draft.id);
  }
}
