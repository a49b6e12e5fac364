import { openDB, type DBSchema, type IDBPDatabase } from 'idb';
import type { DraftStore, KeptChange, KeptDraft, KeptFile } from './draft-store';

interface Garage extends DBSchema {
  drafts: { key: string; value: KeptDraft };
  changes: { key: [string, string]; value: KeptChange; indexes: { draft: string } };
  files: { key: string; value: KeptFile; indexes: { draft: string } };
  notes: { key: string; value: { name: string; value: unknown } };
}

const databaseName = 'witnessmark-garage';
const version = 1;

function open(): Promise<IDBPDatabase<Garage>> {
  return openDB<Garage>(databaseName, version, {
    upgrade(database) {
      database.createObjectStore('drafts', { keyPath: 'id' });
      database.createObjectStore('changes', { keyPath: ['draftId', 'id'] }).createIndex('draft', 'draftId');
      database.createObjectStore('files', { keyPath: 'id' }).createIndex('draft', 'draftId');
      database.createObjectStore('notes', { keyPath: 'name' });
    },
    // A newer version of the page in another tab must not wait for this one.
    blocking: (_current, _blocked, event) => (event.target as IDBDatabase).close(),
  });
}

/** Drafts in IndexedDB. Writes are flushed to disk before they count as kept, where the browser allows asking. */
export async function browserStore(): Promise<DraftStore> {
  let database = await open();
  // Browsers close the connection by themselves at times (Safari, low storage); it is opened again once.
  async function using<T>(work: (database: IDBPDatabase<Garage>) => Promise<T>): Promise<T> {
    try {
      return await work(database);
    } catch (error) {
      if (!(error instanceof DOMException) || error.name !== 'InvalidStateError') throw error;
      database = await open();
      return work(database);
    }
  }
  const strict = { durability: 'strict' } as const;
  return {
    readDrafts: () => using((db) => db.getAll('drafts')),
    readDraft: (id) => using((db) => db.get('drafts', id)),
    putDraft: (draft) => using(async (db) => void (await db.put('drafts', draft))),
    readChanges: (draftId) => using((db) => db.getAllFromIndex('changes', 'draft', draftId)),
    putChanges: (draftId, added, dropped = []) =>
      using(async (db) => {
        const transaction = db.transaction('changes', 'readwrite', strict);
        const writes = [
          ...dropped.map((id) => transaction.store.delete([draftId, id])),
          ...added.map((change) => transaction.store.put(change)),
          transaction.done,
        ];
        await Promise.all(writes);
      }),
    readFiles: async (draftId) => {
      const files = await using((db) => db.getAllFromIndex('files', 'draft', draftId));
      return files.sort((a, b) => (a.addedAt < b.addedAt ? -1 : 1));
    },
    readFile: (id) => using((db) => db.get('files', id)),
    putFile: (file) =>
      using(async (db) => {
        const transaction = db.transaction('files', 'readwrite', strict);
        await Promise.all([transaction.store.put(file), transaction.done]);
      }),
    deleteFile: (id) => using((db) => db.delete('files', id)),
    deleteDraft: (id) =>
      using(async (db) => {
        const transaction = db.transaction(['drafts', 'changes', 'files'], 'readwrite', strict);
        const changes = await transaction.objectStore('changes').index('draft').getAllKeys(id);
        const files = await transaction.objectStore('files').index('draft').getAllKeys(id);
        await Promise.all([
          transaction.objectStore('drafts').delete(id),
          ...changes.map((key) => transaction.objectStore('changes').delete(key)),
          ...files.map((key) => transaction.objectStore('files').delete(key)),
          transaction.done,
        ]);
      }),
    readNote: async <T>(name: string) => (await using((db) => db.get('notes', name)))?.value as T | undefined,
    putNote: (name, value) => using(async (db) => void (await db.put('notes', { name, value }))),
    deleteNote: (name) => using((db) => db.delete('notes', name)),
  };
}
