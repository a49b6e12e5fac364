import 'server-only';
import type { Transaction } from '@/db/index';
import { changesOf } from '@/db/queries/drafts';
import {
  blankIdentity,
  draftSealedAs,
  forgetChanges,
  forgetFiles,
  forgetUploads,
  otherAttachmentParts,
} from '@/db/queries/erasures';
import { filesNamedByUploads } from '@/db/queries/uploads';
import type { LogRow } from '@/db/models/logs';
import { isFieldOfPart, type ErasablePart } from '@/lib/domain/erasure';
import { openDisclosure } from '@/lib/evidence/disclosure';
import type { Attachment } from '@/lib/evidence/format';

interface Erasing {
  log: LogRow;
  seq: number;
  part: ErasablePart;
  transaction: Transaction;
}

/**
 * Erasing must reach wherever else the same words lie: what was typed into the worksheet, receipt or addendum before it
 * was sealed, the machine's own line, and the files with their names. Returns the hashes of files nothing names any
 * more; they are taken off the disk once this has committed.
 */
export async function eraseCopies(erasing: Erasing): Promise<string[]> {
  const { log, seq, part, transaction } = erasing;
  if (part === 'identity' && log.subject === 'machine') await blankIdentity(log.subjectId, transaction);
  const draft = await draftSealedAs(log.id, seq, transaction);
  if (draft !== null) {
    const changes = await changesOf(draft.id, transaction);
    const ids = changes.filter(({ field }) => isFieldOfPart(field, part)).map(({ id }) => id);
    await forgetChanges(draft.id, ids, transaction);
  }
  return part === 'attachments' ? eraseFiles(erasing, draft?.id ?? null) : [];
}

async function eraseFiles({ log, seq, transaction }: Erasing, draftId: string | null): Promise<string[]> {
  const { own, others } = await otherAttachmentParts({ logId: log.id, seq }, transaction);
  const uploaded = draftId === null ? [] : await forgetUploads(draftId, transaction);
  const wanted = new Set([...own.flatMap(hashesIn), ...uploaded]);
  const stillNamed = new Set([...others.flatMap(hashesIn), ...(await filesNamedByUploads([...wanted], transaction))]);
  const gone = [...wanted].filter((sha256) => !stillNamed.has(sha256));
  await forgetFiles(gone, transaction);
  return gone;
}

function hashesIn(disclosure: string): string[] {
  const attachments = openDisclosure(disclosure).value as Attachment[];
  return attachments.flatMap(({ sha256, copy }) => (copy === undefined ? [sha256] : [sha256, copy.sha256]));
}
