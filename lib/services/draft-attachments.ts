import 'server-only';
import { uploadsOf, type UploadWithFiles } from '@/db/queries/drafts';
import type { Transaction } from '@/db/index';
import type { Fields } from '@/lib/domain/field-changes';
import { attachmentRoles, type Attachment, type AttachmentRole } from '@/lib/evidence/format';
import { takenAtOf } from './read-draft';

export interface DraftAttachments {
  attachments: Attachment[];
  /** Which upload an attachment came from, in the same order. */
  uploads: UploadWithFiles[];
  /** By field: pictures the draft names that have not arrived. */
  problems: Record<string, string>;
}

const removedParts = (text: string): string[] => {
  const list: unknown = JSON.parse(text);
  return Array.isArray(list) ? list.filter((item) => typeof item === 'string') : [];
};

function attachmentOf({ upload, file, copy }: UploadWithFiles, role: AttachmentRole, caption: string): Attachment {
  const takenAt = takenAtOf(upload);
  return {
    sha256: file.sha256,
    bytes: file.bytes,
    mediaType: file.mediaType,
    role,
    ...(takenAt === undefined ? {} : { takenAt }),
    receivedAt: upload.receivedAt,
    caption,
    ...(copy === null
      ? {}
      : {
          copy: {
            sha256: copy.sha256,
            bytes: copy.bytes,
            mediaType: copy.mediaType,
            removed: removedParts(upload.copyRemoved),
          },
        }),
  };
}

/**
 * A draft's pictures and papers as they are sealed: role and caption from the fields `photos/<upload>/…`, removed ones
 * left out, the same file once. A picture the fields name but which never arrived is a problem, or it would be lost
 * without a word.
 */
export async function draftAttachments(options: {
  draftId: string;
  fields: Fields;
  /** For uploads nobody gave a role. */
  usualRole: AttachmentRole;
  transaction?: Transaction;
}): Promise<DraftAttachments> {
  const { fields, usualRole } = options;
  const arrived = await uploadsOf(options.draftId, options.transaction);
  const kept = new Map<string, { attachment: Attachment; upload: UploadWithFiles }>();
  for (const upload of arrived) {
    const at = `photos/${upload.upload.id}`;
    if (fields[`${at}/removed`] === 'yes' || kept.has(upload.upload.sha256)) continue;
    const role = attachmentRoles.find((known) => known === fields[`${at}/role`]) ?? usualRole;
    const attachment = attachmentOf(upload, role, (fields[`${at}/caption`] ?? '').trim());
    kept.set(upload.upload.sha256, { attachment, upload });
  }
  return {
    attachments: [...kept.values()].map(({ attachment }) => attachment),
    uploads: [...kept.values()].map(({ upload }) => upload),
    problems: missingPictures(fields, new Set(arrived.map(({ upload }) => upload.id))),
  };
}

function missingPictures(fields: Fields, arrived: Set<string>): Record<string, string> {
  const named = new Set(Object.keys(fields).flatMap((field) => /^photos\/([^/]+)\//.exec(field)?.[1] ?? []));
  const missing = [...named].filter((id) => !arrived.has(id) && fields[`photos/${id}/removed`] !== 'yes');
  return Object.fromEntries(
    missing.map((id) => [
      `photos/${id}`,
      'This picture is still on the phone that took it. Open the garage there until it has been sent, or remove it.',
    ]),
  );
}
