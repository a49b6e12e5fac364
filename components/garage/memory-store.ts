import type { DraftStore, KeptChange, KeptDraft, KeptFile } from './draft-store';

/** Keeps drafts only as long as the page is open, where a browser refuses to keep anything (some private windows). */
export function memoryStore(): DraftStore {
  const drafts = new Map<string, KeptDraft>();
  const changes = new Map<string, Map<string, KeptChange>>();
  const files = new Map<string, KeptFile>();
  const notes = new Map<string, unknown>();
  return {
    readDrafts: async () => [...drafts.values()].map((draft) => ({ ...draft })),
    readDraft: async (id) => drafts.get(id),
    putDraft: async (draft) => void drafts.set(draft.id, { ...draft }),
    readChanges: async (draftId) => [...(changes.get(draftId)?.values() ?? [])].map((change) => ({ ...change })),
    putChanges: async (draftId, added, dropped = []) => {
      const kept = changes.get(draftId) ?? new Map<string, KeptChange>();
      for (const id of dropped) kept.delete(id);
      for (const change of added) kept.set(change.id, { ...change });
      changes.set(draftId, kept);
    },
    readFiles: async (draftId) =>
      [...files.values()].filter((file) => file.draftId === draftId).sort((a, b) => (a.addedAt < b.addedAt ? -1 : 1)),
    readFile: async (id) => files.get(id),
    putFile: async (file) => void files.set(file.id, { ...file }),
    deleteFile: async (id) => void files.delete(id),
    deleteDraft: async (id) => {
      drafts.delete(id);
      changes.delete(id);
      for (const file of files.values()) if (file.draftId === id) files.delete(file.id);
    },
    readNote: async <T>(name: string) => notes.get(name) as T | undefined,
    putNote: async (name, value) => void notes.set(name, value),
    deleteNote: async (name) => void notes.delete(name),
  };
}
