import 'server-only';
import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import { overwriteDeleted, type Transaction } from '@/db/index';
import { findEntry } from '@/db/queries/entries';
import { eraseEntryPart, findErasure } from '@/db/queries/erasures';
import type { EntryRow, LogRow } from '@/db/models/logs';
import type { PersonRow } from '@/db/models/people';
import { erasableParts, erasingWord, erasureText, partWords, type ErasablePart } from '@/lib/domain/erasure';
import { WitnessmarkError, notFound } from '@/lib/errors';
import { parseLeaf } from '@/lib/evidence/leaf';
import { noteErasing, type ErasingNote } from '@/lib/ports/erasing-notes';
import { appendEntry } from './append-entry';
import { eraseCopies } from './erase-copies';
import { finishErasing } from './finish-erasing';
import { logOfOwner, type LogSubject } from './log-of-owner';
import { sealableText } from './sealable-text';

export const eraseInput = z.object({
  part: z.enum(erasableParts, 'Choose what is to be erased.'),
  word: z
    .string({ error: `Type “${erasingWord}”.` })
    .refine(
      (word) => word.trim().toLowerCase() === erasingWord,
      `Type “${erasingWord}” into this field: what is erased cannot be brought back.`,
    ),
  reason: z.union([z.literal(''), sealableText({ empty: '', most: 500 })]).default(''),
  /** Minted with the form. */
  key: z.uuid('Reload the page and try again.'),
});

/**
 * Destroys one part of an entry for good and records that it did. The leaf keeps the part's name and digest, so the
 * record still verifies. One transaction; what is left on the disk afterwards is taken away at once, or at the next
 * start if this is interrupted.
 */
export async function erasePart(options: {
  person: PersonRow;
  subject: LogSubject;
  seq: number;
  input: z.infer<typeof eraseInput>;
}): Promise<{ log: string; recordedSeq: number; isNew: boolean }> {
  const { person, subject, seq, input } = options;
  const log = await logOfOwner({ person, subject });
  const entry = await findEntry(log.id, seq);
  if (entry === null) throw notFound('entry');
  const { part, reason } = input;
  const isMachine = log.subject === 'machine';
  const words = erasureText({ part, of: `${isMachine ? 'entry' : 'line'} ${seq}`, reason });
  const note: ErasingNote = { id: randomUUID(), files: [] };
  const sealed = await appendEntry({
    log: log.id,
    kind: isMachine ? 'addendum' : 'correction',
    by: person.id,
    idempotencyKey: `erase/${log.id}/${seq}/${part}/${input.key}`,
    refersTo: { seq, leafHash: entry.leafHash },
    parts: async ({ transaction }) => {
      await demandThere({ log, entry, part, transaction });
      return {
        author: { person: person.id, name: person.name, role: 'owner' },
        body: isMachine ? { text: words } : { why: words },
      };
    },
    within: async (transaction, recorded) => {
      await overwriteDeleted(transaction);
      note.files.push(...(await eraseCopies({ log, seq, part, transaction })));
      const erasure = { logId: log.id, seq, name: part, erasedAt: recorded.sealedAt, erasedBy: person.id };
      await eraseEntryPart({ ...erasure, recordedSeq: recorded.seq }, transaction);
      await noteErasing(note);
    },
  });
  if (sealed.isNew) await finishNow(note);
  return { log: log.id, recordedSeq: sealed.seq, isNew: sealed.isNew };
}

async function demandThere(options: {
  log: LogRow;
  entry: EntryRow;
  part: ErasablePart;
  transaction: Transaction;
}): Promise<void> {
  const { log, entry, part, transaction } = options;
  const erased = await findErasure({ logId: log.id, seq: entry.seq, name: part }, transaction);
  if (erased !== null) {
    throw new WitnessmarkError('conflict', `This is erased already, as recorded in ${erased.recordedSeq}.`);
  }
  if (parseLeaf(entry.leaf).parts.some(({ name }) => name === part)) return;
  throw new WitnessmarkError('conflict', `There is nothing to erase: this holds no ${partWords[part]}.`);
}

/** The part is gone from the database either way; what cannot be swept now is swept at the next start. */
async function finishNow(note: ErasingNote): Promise<void> {
  try {
    await finishErasing(note);
  } catch (error) {
    console.error('What an erasure left on the disk could not be removed yet; the next start tries again.', error);
  }
}
