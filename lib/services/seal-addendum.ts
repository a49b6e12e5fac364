import 'server-only';
import { z } from 'zod';
import type { Transaction } from '@/db/index';
import { changesOf, closeDraft, draftById } from '@/db/queries/drafts';
import { findEntry } from '@/db/queries/entries';
import { findLogOf } from '@/db/queries/logs';
import { relationsOf } from '@/db/queries/machines';
import type { DraftChangeRow, DraftRow } from '@/db/models/drafts';
import { people, type PersonRow } from '@/db/models/people';
import { standingOf } from '@/lib/auth/guard';
import { addendumFrom, addendumProblems, addendumShown } from '@/lib/domain/addendum';
import { foldChanges } from '@/lib/domain/field-changes';
import { WitnessmarkError, invalidInput, notFound } from '@/lib/errors';
import type { AuthorPart } from '@/lib/evidence/format';
import { appendEntry } from './append-entry';
import { draftAttachments } from './draft-attachments';
import { demandDraft, refuseClosed } from './draft-access';
import type { Parts } from './sealable-parts';
import { deviceId } from './start-draft';

export const sealAddendumInput = z.object({
  draft: deviceId,
  /** The addendum as the person saw it (`addendumShown`); anything else is not sealed in its place. */
  shown: z.string().min(1, 'Reload the page and read the addendum again.').max(200_000),
});

/**
 * Makes an addendum an entry, once. A helper may write one; only an owner seals it. What is sealed is what was shown:
 * the form is its own review.
 */
export async function sealAddendum(options: {
  person: PersonRow;
  input: z.infer<typeof sealAddendumInput>;
}): Promise<{ machine: string; refersToSeq: number; seq: number; isNew: boolean }> {
  const { person, input } = options;
  const draft = await demandDraft({ person, draftId: input.draft });
  if (draft.kind !== 'addendum' || draft.refersToSeq === null) throw notFound('addendum');
  const { subjectId: machine, refersToSeq } = draft;
  await demandOwner(person, machine);
  if (draft.state === 'sealed' && draft.sealedSeq !== null) {
    return { machine, refersToSeq, seq: draft.sealedSeq, isNew: false };
  }
  if (draft.state !== 'open') throw refuseClosed(draft);
  const log = await findLogOf(machine);
  const entry = log === null ? null : await findEntry(log.id, refersToSeq);
  if (log === null || entry === null) throw notFound('entry');
  const { seq, isNew } = await appendEntry({
    log: log.id,
    kind: 'addendum',
    by: person.id,
    idempotencyKey: draft.id,
    refersTo: { seq: entry.seq, leafHash: entry.leafHash },
    parts: ({ transaction }) => partsOf({ person, draftId: draft.id, shown: input.shown, transaction }),
    within: async (transaction, sealed) => {
      const state = { state: 'sealed', sealedLog: sealed.log, sealedSeq: sealed.seq } as const;
      await closeDraft(draft.id, state, sealed.sealedAt, transaction);
    },
  });
  return { machine, refersToSeq, seq, isNew };
}

/** A helper sees the addendum, so "not found" would be no answer to them. */
async function demandOwner(person: PersonRow, machine: string): Promise<void> {
  if ((await standingOf(person, { machine })).machine === 'owner') return;
  throw new WitnessmarkError(
    'forbidden',
    'Only an owner of the machine can seal. What you wrote is kept: ask them to open this page.',
  );
}

async function partsOf(options: {
  person: PersonRow;
  draftId: string;
  shown: string;
  transaction: Transaction;
}): Promise<Parts> {
  const { person, draftId, shown, transaction } = options;
  const draft = await draftById(draftId, transaction);
  if (draft === null) throw notFound('addendum');
  if (draft.state !== 'open') throw refuseClosed(draft);
  const changes = await changesOf(draftId, transaction);
  const fields = foldChanges(changes);
  const addendum = addendumFrom(fields);
  const found = await draftAttachments({ draftId, fields, usualRole: 'document', transaction });
  const problems = { ...addendumProblems(addendum), ...found.problems };
  if (Object.keys(problems).length > 0) throw invalidInput(problems, 'This addendum cannot be sealed yet.');
  if (shown !== addendumShown(addendum)) {
    throw new WitnessmarkError(
      'conflict',
      'Something changed since you read this addendum, on another device perhaps, so nothing was sealed. Read it again, then seal.',
    );
  }
  const { attachments } = found;
  return {
    author: await authorOfText({ person, draft, changes, transaction }),
    body: { text: addendum.text },
    attachments: attachments.length === 0 ? undefined : attachments,
  };
}

/** Whoever wrote the text as it stands; where that is not who seals, both are named. */
async function authorOfText(options: {
  person: PersonRow;
  draft: DraftRow;
  changes: DraftChangeRow[];
  transaction: Transaction;
}): Promise<AuthorPart> {
  const { person, draft, changes, transaction } = options;
  const writerId = foldChanges(changes.map((change) => ({ ...change, value: change.personId }))).text ?? person.id;
  const own: AuthorPart = { person: person.id, name: person.name, role: 'owner' };
  if (writerId === person.id) return own;
  const writer = await people.find({ id: writerId }, { transaction });
  if (writer === null) return own;
  const relations = await relationsOf('machine', draft.subjectId, transaction);
  const isOwner = relations.some(({ personId, relation }) => personId === writerId && relation === 'owner');
  return { person: writer.id, name: writer.name, role: isOwner ? 'owner' : 'helper', sealedBy: person.name };
}
