import 'server-only';
import { struckLines } from '@/lib/domain/standing';
import { openDisclosure } from '@/lib/evidence/disclosure';
import type { Transaction } from '../index';
import { entries, entryParts, type EntryRow } from '../models/logs';

/** Whether an entry that stands names this key in the log. */
export async function standingKey(
  { log, publicKey }: { log: string; publicKey: string },
  transaction: Transaction,
): Promise<boolean> {
  const keys = await standing({ log, kind: 'key' }, transaction);
  for (const { seq } of keys) {
    const part = await entryParts.find({ logId: log, seq, name: 'body' }, { transaction });
    const body = part === null ? null : (openDisclosure(part.disclosure).value as { publicKey?: unknown });
    if (body?.publicKey === publicKey) return true;
  }
  return false;
}

/** The entry in which a person signed another one with a key of their own, if it stands. */
export async function standingSignature(
  { log, seq, by }: { log: string; seq: number; by: string },
  transaction: Transaction,
): Promise<EntryRow | null> {
  const signatures = await standing({ log, kind: 'signature' }, transaction);
  return signatures.find((entry) => entry.refersToSeq === seq && entry.sealedBy === by) ?? null;
}

async function standing(
  { log, kind }: { log: string; kind: EntryRow['kind'] },
  transaction: Transaction,
): Promise<EntryRow[]> {
  const [found, strikes] = await Promise.all([
    entries.all({ logId: log, kind }, { transaction }),
    entries.all({ logId: log, kind: 'strike' }, { transaction }),
  ]);
  const struck = struckLines(strikes);
  return found.filter(({ seq }) => !struck.has(seq));
}
