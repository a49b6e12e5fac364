import 'server-only';
import { erasuresOfEntry } from '@/db/queries/erasures';
import { findEntry } from '@/db/queries/entries';
import type { PersonRow } from '@/db/models/people';
import { erasableParts, type ErasablePart } from '@/lib/domain/erasure';
import { notFound } from '@/lib/errors';
import { parseLeaf } from '@/lib/evidence/leaf';
import { logOfOwner, type LogSubject } from './log-of-owner';

/** Which parts of an entry are there and may be erased. For owners only. */
export async function previewErasure(options: {
  person: PersonRow;
  subject: LogSubject;
  seq: number;
}): Promise<{ parts: ErasablePart[] }> {
  const { person, subject, seq } = options;
  const log = await logOfOwner({ person, subject });
  const entry = await findEntry(log.id, seq);
  if (entry === null) throw notFound('entry');
  const erased = new Set((await erasuresOfEntry(log.id, seq)).map(({ name }) => name));
  const there = new Set<string>(parseLeaf(entry.leaf).parts.map(({ name }) => name));
  return { parts: erasableParts.filter((part) => there.has(part) && !erased.has(part)) };
}
