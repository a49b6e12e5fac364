import 'server-only';
import { Table } from '../table';

export interface DraftRow {
  id: string;
  kind: 'worksheet' | 'receipt' | 'addendum';
  subjectId: string;
  createdBy: string;
  createdAt: string;
  changedAt: string;
  state: 'open' | 'sealed' | 'discarded';
  sealedLog: string | null;
  sealedSeq: number | null;
  /** The entry an addendum adds to. */
  refersToSeq: number | null;
}
export const drafts = new Table<DraftRow>('drafts', ['id'], {
  id: 'text',
  kind: 'text',
  subjectId: 'text',
  createdBy: 'text',
  createdAt: 'text',
  changedAt: 'text',
  state: 'text',
  sealedLog: 'text',
  sealedSeq: 'integer',
  refersToSeq: 'integer',
});

export interface DraftChangeRow {
  draftId: string;
  id: string;
  field: string;
  value: string | null;
  deviceAt: string;
  serverAt: string;
  personId: string;
}
export const draftChanges = new Table<DraftChangeRow>('draft_changes', ['draftId', 'id'], {
  draftId: 'text',
  id: 'text',
  field: 'text',
  value: 'text',
  deviceAt: 'text',
  serverAt: 'text',
  personId: 'text',
});

export interface FileRow {
  sha256: string;
  bytes: number;
  mediaType: string;
  createdAt: string;
}
export const files = new Table<FileRow>('files', ['sha256'], {
  sha256: 'text',
  bytes: 'integer',
  mediaType: 'text',
  createdAt: 'text',
});

export interface UploadRow {
  id: string;
  draftId: string;
  personId: string;
  sha256: string;
  name: string;
  receivedAt: string;
  takenLocal: string | null;
  takenOffset: string | null;
  width: number | null;
  height: number | null;
  copySha256: string | null;
  copyRemoved: string;
  thumbSha256: string | null;
}
export const uploads = new Table<UploadRow>('uploads', ['id'], {
  id: 'text',
  draftId: 'text',
  personId: 'text',
  sha256: 'text',
  name: 'text',
  receivedAt: 'text',
  takenLocal: 'text',
  takenOffset: 'text',
  width: 'integer',
  height: 'integer',
  copySha256: 'text',
  copyRemoved: 'text',
  thumbSha256: 'text',
});
