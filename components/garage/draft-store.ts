import type { FieldChange } from '@/lib/domain/field-changes';

export type DraftKind = 'worksheet' | 'receipt' | 'addendum';

/** A worksheet, receipt or addendum as this device keeps it. Instants are ISO 8601 texts. */
export interface KeptDraft {
  id: string;
  kind: DraftKind;
  /** A machine's id for a worksheet or an addendum, a shelf's for a receipt. */
  subject: string;
  /** The entry an addendum adds to. */
  refersToSeq?: number;
  /** Whose it is: another person on the same phone neither sees nor sends it. */
  person: string;
  createdAt: string;
  changedAt: string;
  /** The server has the draft; its changes are counted one by one. */
  isOnServer: boolean;
  state: 'open' | 'sealed' | 'discarded';
  /** Server time of the latest change fetched. */
  since?: string;
  sealed?: { log: string; seq: number };
  /** The server's sentence when it will not take the draft or its changes. They stay here. */
  refusal?: string;
}

export interface KeptChange extends FieldChange {
  draftId: string;
  /** The server has it, or has refused it for good. */
  isSent: boolean;
  /** The server's sentence when it will not take this one change. */
  refusal?: string;
}

/** What the server answers for a stored upload. */
export interface UploadAnswer {
  id: string;
  sha256: string;
  bytes: number;
  mediaType: string;
  name: string;
  receivedAt: string;
  takenAt?: { local: string; offset?: string };
  width?: number;
  height?: number;
  copySha256?: string | null;
  thumbSha256?: string | null;
}

/** A photo or PDF. The blob stays until the server has answered for it. */
export interface KeptFile {
  id: string;
  draftId: string;
  name: string;
  bytes: number;
  mediaType: string;
  addedAt: string;
  state: 'waiting' | 'sent' | 'refused';
  blob?: Blob;
  answer?: UploadAnswer;
  refusal?: string;
}

/** Where drafts live on this device. Every method is whole or fails; a promise that resolved is kept. */
export interface DraftStore {
  readDrafts(): Promise<KeptDraft[]>;
  readDraft(id: string): Promise<KeptDraft | undefined>;
  putDraft(draft: KeptDraft): Promise<void>;
  readChanges(draftId: string): Promise<KeptChange[]>;
  /** `dropped` are ids of the same draft that the new changes replace before they were sent. */
  putChanges(draftId: string, changes: KeptChange[], dropped?: string[]): Promise<void>;
  readFiles(draftId: string): Promise<KeptFile[]>;
  readFile(id: string): Promise<KeptFile | undefined>;
  putFile(file: KeptFile): Promise<void>;
  deleteFile(id: string): Promise<void>;
  /** Removes a draft with its changes and files. */
  deleteDraft(id: string): Promise<void>;
  /** Small values by name, such as the last picture of the garage the server gave. */
  readNote<T>(name: string): Promise<T | undefined>;
  putNote(name: string, value: unknown): Promise<void>;
  deleteNote(name: string): Promise<void>;
}
