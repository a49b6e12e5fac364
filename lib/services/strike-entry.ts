import 'server-only';
import { z } from 'zod';
import { findEntry } from '@/db/queries/entries';
import type { PersonRow } from '@/db/models/people';
import { WitnessmarkError, notFound } from '@/lib/errors';
import { appendEntry } from './append-entry';
import { logOfOwner, type LogSubject } from './log-of-owner';
import { sealableText } from './sealable-text';
import { strikeEffect } from './strike-effect';

export const strikeInput = z.object({
  reason: sealableText({ empty: 'Say why it is struck. The reason is sealed with the strike.', most: 2000 }),
  /** Minted with the form: a second press seals nothing a second time. */
  key: z.uuid('Reload the page and try again.'),
});

/**
 * Withdraws an entry with a reason, which is itself an entry; the struck one stays readable. Judged inside the sealing
 * transaction, so that of two strikes of the same entry one is refused. Throws `conflict` with the sentence.
 */
export async function strikeEntry(options: {
  person: PersonRow;
  subject: LogSubject;
  seq: number;
  input: z.infer<typeof strikeInput>;
}): Promise<{ log: string; seq: number; isNew: boolean }> {
  const { person, subject, seq, input } = options;
  const log = await logOfOwner({ person, subject });
  const entry = await findEntry(log.id, seq);
  if (entry === null) throw notFound('entry');
  const sealed = await appendEntry({
    log: log.id,
    kind: 'strike',
    by: person.id,
    idempotencyKey: `strike/${log.id}/${seq}/${input.key}`,
    refersTo: { seq, leafHash: entry.leafHash },
    parts: async ({ transaction }) => {
      const { refusal } = await strikeEffect({ log, seq, transaction });
      if (refusal !== null) throw new WitnessmarkError('conflict', refusal);
      return {
        author: { person: person.id, name: person.name, role: 'owner' },
        body: { reason: input.reason },
      };
    },
  });
  return { log: log.id, seq: sealed.seq, isNew: sealed.isNew };
}
