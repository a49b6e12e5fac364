import 'server-only';
import type { StoredLog } from '@/db/queries/entries';
import type { TokenRow } from '@/db/models/logs';
import { authorities } from '@/lib/ports/time-stamp-authority/authorities';
import type { TokenView } from '@/lib/services/record-view';
import { trustOfToken } from '@/lib/services/trust-of-token';

/** The stamps over an entry: the earliest of each authority, independent or not, and those still to come. */
export interface StampsOfEntry {
  tokens: TokenView[];
  /** Names of authorities. */
  stampsToCome: string[];
}

/**
 * By seq. A checkpoint covers every line before its size, so an entry's stamps are those of any later checkpoint too,
 * and nothing is to come from an authority that stamped a later one.
 */
export function stampsOfLog(stored: StoredLog): Map<number, StampsOfEntry> {
  const [tokens, jobs] = [bySize(stored.tokens), bySize(stored.stampJobs)];
  const named = new Set(authorities().map(({ name }) => name));
  const earliest = new Map<string, TokenView>();
  const toCome = new Set<string>();
  const found = new Map<number, StampsOfEntry>();
  for (let size = stored.checkpoints.length; size > 0; size -= 1) {
    for (const row of tokens.get(size) ?? []) keepEarliest(earliest, row);
    for (const { authority } of jobs.get(size) ?? []) if (named.has(authority)) toCome.add(authority);
    const views = [...earliest.values()];
    const stampsToCome = [...toCome].filter((name) => views.every(({ authority }) => authority !== name));
    found.set(size - 1, { tokens: views, stampsToCome });
  }
  return found;
}

/** An earlier stamp that nobody vouches for must not hide a later one of the same authority that somebody does. */
function keepEarliest(earliest: Map<string, TokenView>, row: TokenRow): void {
  const { authority, genTime, isOwnAuthority, sha256 } = row;
  const trust = trustOfToken(row);
  const key = `${trust.isIndependent} ${authority}`;
  const known = earliest.get(key);
  if (known === undefined || genTime <= known.genTime) {
    earliest.set(key, { authority, genTime, isOwnAuthority, ...trust, sha256 });
  }
}

function bySize<Row extends { size: number }>(rows: readonly Row[]): Map<number, Row[]> {
  const found = new Map<number, Row[]>();
  for (const row of rows) found.set(row.size, [...(found.get(row.size) ?? []), row]);
  return found;
}
