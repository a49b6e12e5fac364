import 'server-only';
import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import type { Transaction } from '@/db/index';
import { insertDraft } from '@/db/queries/drafts';
import { findEntry, findEntryByIdempotencyKey } from '@/db/queries/entries';
import { insertUpload } from '@/db/queries/uploads';
import type { FileRow } from '@/db/models/drafts';
import type { LogRow } from '@/db/models/logs';
import type { PersonRow } from '@/db/models/people';
import { coveredPixels, mostBoxes, type PictureBox } from '@/lib/domain/black-boxes';
import { blackedOutCaption, blackedOutText } from '@/lib/domain/blacked-out';
import { WitnessmarkError, invalidInput, notFound } from '@/lib/errors';
import type { Attachment } from '@/lib/evidence/format';
import { blackOut } from '@/lib/ports/black-out';
import { blobStore, putBlob } from '@/lib/ports/blob-store';
import { now } from '@/lib/ports/clock';
import { appendEntry } from './append-entry';
import { logOfOwner, type LogSubject } from './log-of-owner';
import { picturesOf } from './pictures-to-black-out';
import { sealableText } from './sealable-text';

const noBoxes = 'Draw at least one box over what is to be black.';
const fraction = z.number().min(-1).max(2);
const boxList = z
  .array(z.object({ left: fraction, top: fraction, width: z.number().min(0).max(3), height: z.number().min(0).max(3) }))
  .min(1, noBoxes)
  .max(mostBoxes, `At most ${mostBoxes} boxes fit on one picture. Draw fewer, larger ones.`);

export const blackOutInput = z.object({
  /** SHA-256 of the shared copy. */
  picture: z.string().regex(/^[0-9a-f]{64}$/, 'Go back to the entry and choose one of its pictures.'),
  /** As the form sends it: JSON. */
  boxes: z
    .string({ error: noBoxes })
    .max(20_000, noBoxes)
    .transform((text, context): unknown => {
      try {
        return JSON.parse(text);
      } catch {
        context.addIssue({ code: 'custom', message: noBoxes });
        return z.NEVER;
      }
    })
    .pipe(boxList),
  reason: z.union([z.literal(''), sealableText({ empty: '', most: 500 })]).default(''),
  /** Minted with the form. */
  key: z.uuid('Reload the page and try again.'),
});

/**
 * Makes a copy of a picture with boxes of it black, and seals it as a line about the entry that holds the picture. The
 * picture stays as it is, and the record goes on naming it. Owners only. A second press gets the first result.
 */
export async function blackOutPicture(options: {
  person: PersonRow;
  subject: LogSubject;
  seq: number;
  input: z.infer<typeof blackOutInput>;
}): Promise<{ log: string; seq: number; isNew: boolean }> {
  const { person, subject, seq, input } = options;
  const log = await logOfOwner({ person, subject });
  const entry = await findEntry(log.id, seq);
  if (entry === null) throw notFound('entry');
  const idempotencyKey = `black-out/${log.id}/${seq}/${input.key}`;
  const first = await findEntryByIdempotencyKey(idempotencyKey, {});
  if (first !== null) return { log: log.id, seq: first.seq, isNew: false };

  const shown = await demandPicture({ log, seq, picture: input.picture });
  const made = await makeCopy(input.picture, input.boxes);
  const isMachine = log.subject === 'machine';
  const text = blackedOutText({ role: shown.role, of: `${isMachine ? 'entry' : 'line'} ${seq}`, reason: input.reason });
  const { copy } = made;
  const file = { sha256: copy.sha256, bytes: copy.bytes, mediaType: copy.mediaType };
  const attachment: Attachment = {
    ...file,
    role: shown.role,
    receivedAt: copy.createdAt,
    caption: blackedOutCaption(input.picture),
    copy: { ...file, removed: [] },
  };
  const sealed = await appendEntry({
    log: log.id,
    kind: isMachine ? 'addendum' : 'correction',
    by: person.id,
    idempotencyKey,
    refersTo: { seq, leafHash: entry.leafHash },
    parts: async ({ transaction }) => {
      await demandPicture({ log, seq, picture: input.picture, transaction });
      await demandStored(made);
      return {
        author: { person: person.id, name: person.name, role: 'owner' },
        body: isMachine ? { text } : { why: text },
        attachments: [attachment],
      };
    },
    within: (transaction, { seq: sealedSeq }) => nameFiles({ person, log, refersToSeq: seq, sealedSeq, made, transaction }), // prettier-ignore
  });
  return { log: log.id, seq: sealed.seq, isNew: sealed.isNew };
}

interface Made {
  copy: FileRow;
  thumb: FileRow;
  width: number;
  height: number;
}

/** Asked before the work of decoding, and again while the log is held: an erasure may have come between. */
async function demandPicture(options: {
  log: LogRow;
  seq: number;
  picture: string;
  transaction?: Transaction;
}): Promise<Attachment> {
  const { log, seq, picture, transaction } = options;
  const found = (await picturesOf(log.id, seq, transaction)).find(({ copy }) => copy?.sha256 === picture);
  if (found !== undefined) return found;
  const what = log.subject === 'machine' ? 'Entry' : 'Line';
  throw new WitnessmarkError(
    'conflict',
    `${what} ${seq} holds no such picture. Go back and choose one of its pictures.`,
  );
}

/** Files before rows: made, written and only then named. */
async function makeCopy(sha256: string, boxes: PictureBox[]): Promise<Made> {
  const source = await blobStore.read(sha256).catch((error: unknown) => {
    throw new WitnessmarkError('conflict', 'This picture is not on file any more. Tell the steward.', {
      log: `black-out: ${sha256}`,
      cause: error,
    });
  });
  if (boxes.some((box) => coveredPixels(box, { width: 1600, height: 1600 }) === null)) {
    throw invalidInput({ boxes: 'One of the boxes lies beside the picture or has no size. Remove it or move it.' });
  }
  const { copy, thumb, width, height } = await blackOut(source, boxes);
  const createdAt = now().toISOString();
  return {
    copy: { ...(await putBlob(copy)), mediaType: 'image/jpeg', createdAt },
    thumb: { ...(await putBlob(thumb)), mediaType: 'image/webp', createdAt },
    width,
    height,
  };
}

/** Erasing another copy of the same bytes may have taken the file away again. */
async function demandStored({ copy, thumb }: Made): Promise<void> {
  for (const { sha256 } of [copy, thumb]) {
    if (!(await blobStore.has(sha256))) throw new WitnessmarkError('conflict', 'The copy was not kept. Try again.');
  }
}

/** Files are served, counted and erased by the draft they came with; here that is one sealed from the start. */
async function nameFiles(options: {
  person: PersonRow;
  log: LogRow;
  refersToSeq: number;
  sealedSeq: number;
  made: Made;
  transaction: Transaction;
}): Promise<void> {
  const { person, log, refersToSeq, sealedSeq, made, transaction } = options;
  const { copy, thumb, width, height } = made;
  const at = copy.createdAt;
  const draftId = randomUUID();
  await insertDraft(
    {
      id: draftId,
      kind: log.subject === 'machine' ? 'addendum' : 'receipt',
      subjectId: log.subjectId,
      createdBy: person.id,
      createdAt: at,
      changedAt: at,
      state: 'sealed',
      sealedLog: log.id,
      sealedSeq,
      refersToSeq,
    },
    transaction,
  );
  await insertUpload(
    {
      id: randomUUID(),
      draftId,
      personId: person.id,
      sha256: copy.sha256,
      name: 'blacked-out.jpg',
      receivedAt: at,
      takenLocal: null,
      takenOffset: null,
      width,
      height,
      copySha256: copy.sha256,
      copyRemoved: '[]',
      thumbSha256: thumb.sha256,
    },
    [copy, thumb],
    transaction,
  );
}
