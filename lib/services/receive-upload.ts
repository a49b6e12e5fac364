import 'server-only';
import { readFile } from 'node:fs/promises';
import { z } from 'zod';
import { write, type Transaction } from '@/db/index';
import { drafts, uploads, type DraftRow, type UploadRow } from '@/db/models/drafts';
import type { PersonRow } from '@/db/models/people';
import { bytesSentBy, filesBySha256, findUpload, insertUpload } from '@/db/queries/uploads';
import { WitnessmarkError, notFound } from '@/lib/errors';
import { now } from '@/lib/ports/clock';
import { blobStore, dropBlob, keepBlob, putBlob, receiveBlob, type IncomingBlob } from '@/lib/ports/blob-store';
import { readPicture, sniff, type KnownType, type Picture } from '@/lib/ports/image';
import { authoriseDraftSubject } from './draft-access';
import { uploadView, type UploadView } from './read-draft';

/** Phones make pictures of 3 to 15 MB; a scanned invoice may be larger. */
export const largestUploadBytes = 40_000_000;

/** Pictures and papers of one worksheet, receipt or addendum. */
export const mostUploadsOfADraft = 100;

/** What one person may send within a day: some five hundred large photographs. */
export const mostBytesADay = 4_000_000_000;
const millisecondsInDay = 24 * 60 * 60 * 1000;

export const uploadQuery = z.object({
  id: z.uuid(),
  draft: z.uuid(),
  name: z
    .string()
    .min(1)
    .max(255)
    // Only the last part of a path is a name, and controls have no place in one.
    .transform((name) => name.replace(/^.*[/\\]/s, '').replace(/\p{C}/gu, '') || 'file'),
  sha256: z
    .string()
    .regex(/^[0-9a-f]{64}$/)
    .optional(),
});

export interface UploadAnswer extends UploadView {
  isNew: boolean;
}

/**
 * Takes one file in: streamed to disk and hashed as received, told by its bytes, decoded whole, and only then kept.
 * A repeated id with the same bytes gets the first answer; nothing is kept of a refused file.
 */
export async function receiveUpload(options: {
  person: PersonRow;
  query: z.infer<typeof uploadQuery>;
  body: AsyncIterable<Uint8Array>;
  declaredBytes?: number;
}): Promise<UploadAnswer> {
  const { person, query } = options;
  const draft = await drafts.find({ id: query.draft });
  if (draft === null) throw notFound('worksheet or receipt');
  await authoriseDraftSubject({ person, kind: draft.kind, subject: draft.subjectId });

  const blob = await receiveBlob(options.body, largestUploadBytes);
  try {
    checkReceived(blob, query, options.declaredBytes);
    const known = await findUpload(query.id);
    if (known !== null) return await firstAnswer(known, blob, draft.id, query.name);
    await demandOpen(draft, query.name);
    await demandAllowance(person, blob, query.name);
    const mediaType = knownType(blob, query.name);
    return await keep({ person, query, blob, mediaType });
  } catch (error) {
    await dropBlob(blob);
    throw error;
  }
}

function checkReceived(blob: IncomingBlob, query: z.infer<typeof uploadQuery>, declaredBytes?: number): void {
  if (blob.bytes === 0) throw refusal(query.name, 'is empty. Choose the file again.');
  const isShort = declaredBytes !== undefined && declaredBytes !== blob.bytes;
  if (isShort || (query.sha256 !== undefined && query.sha256 !== blob.sha256)) {
    throw new WitnessmarkError('conflict', `${query.name} did not arrive whole. Send it again.`, {
      log: `upload ${query.id}: declared ${declaredBytes} bytes, received ${blob.bytes}`,
    });
  }
}

/** Asked before the work of decoding, and again when the row is written: the seal may have come between. */
async function demandOpen(draft: DraftRow | null, name: string, transaction?: Transaction): Promise<void> {
  if (draft === null) throw notFound('worksheet or receipt');
  if (draft.state !== 'open') {
    const state = draft.state === 'sealed' ? 'sealed already' : 'discarded';
    throw new WitnessmarkError('already-sealed', `${name} came too late: this is ${state}.`);
  }
  const count = await uploads.count({ draftId: draft.id }, transaction ? { transaction } : {});
  if (count >= mostUploadsOfADraft) {
    throw new WitnessmarkError(
      'too-large',
      `${name} was not taken: ${mostUploadsOfADraft} pictures and papers are here already. Begin another worksheet or receipt for it.`,
    );
  }
}

async function demandAllowance(person: PersonRow, { bytes }: IncomingBlob, name: string): Promise<void> {
  const since = new Date(now().getTime() - millisecondsInDay).toISOString();
  if ((await bytesSentBy(person.id, since)) + bytes <= mostBytesADay) return;
  throw new WitnessmarkError(
    'too-large',
    `${name} was not taken: you have sent ${mostBytesADay / 1e9} GB within a day. It stays on your device; send it tomorrow.`,
  );
}

async function firstAnswer(known: UploadRow, blob: IncomingBlob, draftId: string, name: string): Promise<UploadAnswer> {
  // The upload may be somebody else's: it is called by the name that was sent, not by the one on file.
  if (known.sha256 !== blob.sha256 || known.draftId !== draftId) {
    throw new WitnessmarkError(
      'conflict',
      `${name} cannot be kept: another file is on file under its id. Choose it again.`,
    );
  }
  await dropBlob(blob);
  const [file] = await filesBySha256([known.sha256]);
  return answer(known, file?.bytes ?? blob.bytes, file?.mediaType ?? 'application/octet-stream', false);
}

function knownType(blob: IncomingBlob, name: string): KnownType {
  const type = sniff(blob.head);
  if (type !== null) return type;
  throw refusal(
    name,
    'is not a JPEG, PNG, WebP or HEIC picture or a PDF, whatever its name says. Choose another file.',
  );
}

async function keep(options: {
  person: PersonRow;
  query: z.infer<typeof uploadQuery>;
  blob: IncomingBlob;
  mediaType: KnownType;
}): Promise<UploadAnswer> {
  const { person, query, blob, mediaType } = options;
  const picture = mediaType === 'application/pdf' ? null : await decode(blob, mediaType, query.name);
  const original = await keepBlob(blob);
  const copy = picture && (await putBlob(picture.copy));
  const thumb = picture && (await putBlob(picture.thumb));
  const receivedAt = now().toISOString();
  const row: UploadRow = {
    id: query.id,
    draftId: query.draft,
    personId: person.id,
    sha256: original.sha256,
    name: query.name,
    receivedAt,
    takenLocal: picture?.takenAt?.local ?? null,
    takenOffset: picture?.takenAt?.offset ?? null,
    width: picture?.width ?? null,
    height: picture?.height ?? null,
    copySha256: copy?.sha256 ?? null,
    copyRemoved: JSON.stringify(picture?.removed ?? []),
    thumbSha256: thumb?.sha256 ?? null,
  };
  const named = [
    { ...original, mediaType, createdAt: receivedAt },
    ...(copy ? [{ ...copy, mediaType: 'image/jpeg', createdAt: receivedAt }] : []),
    ...(thumb ? [{ ...thumb, mediaType: 'image/webp', createdAt: receivedAt }] : []),
  ];
  await write(async (transaction) => {
    await demandOpen(await drafts.find({ id: row.draftId }, { transaction }), row.name, transaction);
    await demandStillThere(named, row.name);
    await insertUpload(row, named, transaction);
  });
  return answer(row, original.bytes, mediaType, true);
}

/** An erasure may have removed the same bytes between their arrival and this moment; both happen in the write queue. */
async function demandStillThere(named: { sha256: string }[], name: string): Promise<void> {
  for (const { sha256 } of named) {
    if (!(await blobStore.has(sha256))) throw new WitnessmarkError('conflict', `${name} was not kept. Send it again.`);
  }
}

async function decode(
  blob: IncomingBlob,
  mediaType: Exclude<KnownType, 'application/pdf'>,
  name: string,
): Promise<Picture> {
  try {
    return await readPicture(() => readFile(blob.temporary), mediaType);
  } catch (error) {
    if (/pixel limit|too many pixels/i.test(String(error))) {
      throw refusal(name, 'has more than 50 megapixels. Take it again at a smaller size.');
    }
    throw refusal(
      name,
      'cannot be opened as a picture: it is damaged or not what it claims to be. Take it again.',
      error,
    );
  }
}

function refusal(name: string, why: string, cause?: unknown): WitnessmarkError {
  return new WitnessmarkError('unsupported-file', `${name} ${why}`, {
    ...(cause === undefined ? {} : { log: String(cause), cause }),
  });
}

function answer(upload: UploadRow, bytes: number, mediaType: string, isNew: boolean): UploadAnswer {
  return { ...uploadView({ upload, file: { bytes, mediaType } }), isNew };
}
