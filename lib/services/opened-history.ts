import 'server-only';
import type { PacketSummary } from '@/lib/packet/summary';
import type { RecordView } from './record-view';
import type { SealedHistory, SealedService } from './read-history';

/** A machine's history from what is opened alone, for the rules that a reader sees. Struck entries are left out. */
export function openedHistory(record: RecordView, { history }: Pick<PacketSummary, 'history'>): SealedHistory {
  const services = record.entries.flatMap((entry): SealedService[] => {
    if (entry.kind !== 'service' || entry.body === null || entry.struckBy !== null) return [];
    const { seq, leafHash, sealedAt, body, attachments } = entry;
    return [{ seq, leafHash, sealedAt, body, attachments }];
  });
  const terms = record.entries.findLast(({ seq, struckBy }) => struckBy === null && record.termsBySeq.has(seq));
  return {
    log: record.log.id,
    opening: record.opening,
    terms: record.terms,
    termsSeq: terms?.seq ?? null,
    services,
    readings: [...history.readings],
  };
}
