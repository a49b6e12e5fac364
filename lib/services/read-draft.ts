import 'server-only';
import { changesOf, uploadsOf, type UploadWithFiles } from '@/db/queries/drafts';
import { people, type PersonRow } from '@/db/models/people';
import type { DraftChangeRow, DraftRow } from '@/db/models/drafts';
import { demandDraft } from './draft-access';

export interface ChangeView {
  id: string;
  field: string;
  value: string | null;
  deviceAt: string;
  serverAt: string;
  /** Id of the person who made it. */
  person: string;
}
export interface UploadView {
  id: string;
  sha256: string;
  bytes: number;
  mediaType: string;
  name: string;
  receivedAt: string;
  takenAt?: { local: string; offset?: string };
  width?: number;
  height?: number;
  copySha256: string | null;
  thumbSha256: string | null;
}
export interface DraftView {
  id: string;
  kind: DraftRow['kind'];
  /** The machine of a worksheet or an addendum, the shelf of a receipt. */
  subject: string;
  state: DraftRow['state'];
  createdBy: string;
  createdAt: string;
  changedAt: string;
  /** Where it was sealed, once it is. */
  sealedLog: string | null;
  sealedSeq: number | null;
  /** The entry an addendum adds to. */
  refersToSeq: number | null;
}
export interface DraftWithChanges {
  draft: DraftView;
  changes: ChangeView[];
  uploads: UploadView[];
  /** Names of everybody who made a change. */
  people: { id: string; name: string }[];
  /** Newest server time among the changes, to give as `since`. */
  at: string;
}

export function changeView(row: DraftChangeRow): ChangeView {
  const { id, field, value, deviceAt, serverAt } = row;
  return { id, field, value, deviceAt, serverAt, person: row.personId };
}

export function draftView(row: DraftRow): DraftView {
  const { subjectId, ...members } = row;
  return { ...members, subject: subjectId };
}

/** When the camera says a picture was taken. Corroboration only: anybody can edit it. */
export function takenAtOf({ takenLocal, takenOffset }: UploadWithFiles['upload']) {
  if (takenLocal === null) return undefined;
  return takenOffset === null ? { local: takenLocal } : { local: takenLocal, offset: takenOffset };
}

export function uploadView(options: {
  upload: UploadWithFiles['upload'];
  file: Pick<UploadWithFiles['file'], 'bytes' | 'mediaType'>;
}): UploadView {
  const { upload, file } = options;
  const takenAt = takenAtOf(upload);
  return {
    id: upload.id,
    sha256: upload.sha256,
    bytes: file.bytes,
    mediaType: file.mediaType,
    name: upload.name,
    receivedAt: upload.receivedAt,
    ...(takenAt === undefined ? {} : { takenAt }),
    ...(upload.width === null ? {} : { width: upload.width }),
    ...(upload.height === null ? {} : { height: upload.height }),
    copySha256: upload.copySha256,
    thumbSha256: upload.thumbSha256,
  };
}

/** A draft with every change and upload, for a person who may write in it. */
export async function readDraft(options: { person: PersonRow; draftId: string }): Promise<DraftWithChanges> {
  const draft = await demandDraft(options);
  const changes = await changesOf(draft.id);
  const uploads = await uploadsOf(draft.id);
  const writers = await people.all({ id: [...new Set(changes.map((change) => change.personId))] });
  return {
    draft: draftView(draft),
    changes: changes.map(changeView),
    uploads: uploads.map(uploadView),
    people: writers.map(({ id, name }) => ({ id, name })),
    at: changes.at(-1)?.serverAt ?? draft.createdAt,
  };
}
