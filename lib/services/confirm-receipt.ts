import 'server-only';
import { changesOf, closeDraft, draftById } from '@/db/queries/drafts';
import { findLogOf } from '@/db/queries/logs';
import type { PersonRow } from '@/db/models/people';
import { standingOf } from '@/lib/auth/guard';
import { foldChanges, purchaseFrom, receiptFrom, receiptProblems } from '@/lib/domain/receipt';
import { WitnessmarkError, invalidInput, notFound } from '@/lib/errors';
import type { AuthorPart } from '@/lib/evidence/format';
import { appendEntry } from './append-entry';
import { draftAttachments } from './draft-attachments';
import { demandDraft, refuseClosed } from './draft-access';

/** Seals a receipt on its shelf's log as a purchase, once: weeks before a claim it is the rider's best evidence. */
export async function confirmReceipt(options: {
  person: PersonRow;
  draftId: string;
}): Promise<{ log: string; seq: number; isNew: boolean }> {
  const { person, draftId } = options;
  const draft = await demandDraft({ person, draftId });
  const log = await findLogOf(draft.subjectId);
  if (draft.kind !== 'receipt' || log === null) throw notFound('receipt');
  const standing = await standingOf(person, { shelf: draft.subjectId });
  if (standing.shelf !== 'owner') {
    throw new WitnessmarkError(
      'forbidden',
      'Only an owner of the shelf can confirm a receipt. Ask them to look at it.',
    );
  }
  if (draft.state === 'sealed' && draft.sealedLog !== null && draft.sealedSeq !== null) {
    return { log: draft.sealedLog, seq: draft.sealedSeq, isNew: false };
  }
  if (draft.state !== 'open') throw refuseClosed(draft);
  const author: AuthorPart = { person: person.id, name: person.name, role: 'owner' };
  const { seq, isNew } = await appendEntry({
    log: log.id,
    kind: 'purchase',
    by: person.id,
    idempotencyKey: draftId,
    parts: async ({ transaction, sealedAt }) => {
      const current = await draftById(draftId, transaction);
      if (current === null) throw notFound('receipt');
      if (current.state !== 'open') throw refuseClosed(current);
      const fields = foldChanges(await changesOf(draftId, transaction));
      const receipt = receiptFrom({ zone: person.timeZone, ...fields });
      const found = await draftAttachments({ draftId, fields, usualRole: 'receipt-page', transaction });
      const problems = { ...receiptProblems(receipt, { now: sealedAt }), ...found.problems };
      if (Object.keys(problems).length > 0) throw invalidInput(problems, 'This receipt cannot be confirmed yet.');
      const attachments = found.attachments.length === 0 ? undefined : found.attachments;
      return { author, attachments, ...purchaseFrom(receipt) };
    },
    within: async (transaction, sealed) => {
      const state = { state: 'sealed', sealedLog: sealed.log, sealedSeq: sealed.seq } as const;
      await closeDraft(draftId, state, sealed.sealedAt, transaction);
    },
  });
  return { log: log.id, seq, isNew };
}
