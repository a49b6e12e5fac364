import 'server-only';
import type { Transaction } from '@/db/index';
import { closeDraft, draftById } from '@/db/queries/drafts';
import { findLogOf } from '@/db/queries/logs';
import { insertDraws } from '@/db/queries/lots';
import type { DraftRow } from '@/db/models/drafts';
import type { PersonRow } from '@/db/models/people';
import { standingOf } from '@/lib/auth/guard';
import { WitnessmarkError, invalidInput, notFound } from '@/lib/errors';
import { appendEntry } from './append-entry';
import { composeWorksheet, drawRowsOf, type ComposedWorksheet } from './compose-worksheet';
import { demandDraft, refuseClosed } from './draft-access';

export interface SealedWorksheet {
  machine: string;
  log: string;
  seq: number;
  isNew: boolean;
}

/**
 * Makes a worksheet an entry, once. The entry is composed inside the sealing transaction, so that balances, terms and
 * changes are those of that moment; `reviewed` is the fingerprint of what the person was shown, and anything else is
 * not sealed in its place.
 */
export async function sealWorksheet(options: {
  person: PersonRow;
  draftId: string;
  reviewed?: string;
}): Promise<SealedWorksheet> {
  const { person, draftId, reviewed } = options;
  const draft = await demandDraft({ person, draftId });
  if (draft.kind !== 'worksheet') throw notFound('worksheet');
  await demandSealer(person, draft);
  if (draft.state === 'sealed') return alreadySealed(draft);
  if (draft.state !== 'open') throw refuseClosed(draft);
  const log = await findLogOf(draft.subjectId);
  if (log === null) throw notFound('machine');

  let composed: ComposedWorksheet | undefined;
  const { seq, isNew } = await appendEntry({
    log: log.id,
    kind: 'service',
    by: person.id,
    idempotencyKey: draftId,
    parts: async ({ transaction, sealedAt }) => {
      const current = await stillOpen(draft, transaction);
      composed = await composeWorksheet({ draft: current, person, at: sealedAt, transaction });
      if (Object.keys(composed.problems).length > 0)
        throw invalidInput(composed.problems, 'This cannot be sealed yet.');
      if (reviewed !== undefined && reviewed !== composed.fingerprint) throw changedMeanwhile();
      return composed.parts;
    },
    within: async (transaction, sealed) => {
      if (composed?.body === undefined) throw new Error('A worksheet was sealed without having been composed.');
      await insertDraws(drawRowsOf(composed.body, sealed), transaction);
      const state = { state: 'sealed', sealedLog: sealed.log, sealedSeq: sealed.seq } as const;
      await closeDraft(draftId, state, sealed.sealedAt, transaction);
    },
  });
  return { machine: draft.subjectId, log: log.id, seq, isNew };
}

/** A helper sees the worksheet, so "not found" would be no answer to them. */
async function demandSealer(person: PersonRow, draft: DraftRow): Promise<void> {
  const { machine } = await standingOf(person, { machine: draft.subjectId });
  if (machine === 'owner') return;
  throw new WitnessmarkError('forbidden', 'Only an owner of the machine can seal. Ask them to review this worksheet.');
}

async function stillOpen(draft: DraftRow, transaction: Transaction): Promise<DraftRow> {
  const current = await draftById(draft.id, transaction);
  if (current === null) throw notFound('worksheet');
  if (current.state !== 'open') throw refuseClosed(current);
  if (current.subjectId !== draft.subjectId) throw changedMeanwhile();
  return current;
}

function changedMeanwhile(): WitnessmarkError {
  return new WitnessmarkError(
    'conflict',
    'Something changed since this page was opened, so nothing was sealed. Reload the page, read the entry again, then seal.',
  );
}

function alreadySealed(draft: DraftRow): SealedWorksheet {
  if (draft.sealedLog === null || draft.sealedSeq === null) throw refuseClosed(draft);
  return { machine: draft.subjectId, log: draft.sealedLog, seq: draft.sealedSeq, isNew: false };
}
