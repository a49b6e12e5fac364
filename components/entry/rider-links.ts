import { paths } from '@/lib/paths';
import type { EntryLinks } from './entry-facts';

/** Addresses as a machine's own people follow them; receipts only of shelves they may open. */
export function entryLinks(
  machine: string,
  shelfByLog: ReadonlyMap<string, string>,
  relation: 'owner' | 'helper' = 'helper',
): EntryLinks {
  return {
    file: (sha256, kind) => paths.api.file(sha256, kind, machine),
    entry: (seq) => paths.entry(machine, seq),
    ...(relation === 'owner' ? { blackOut: (seq: number, copy: string) => paths.blackOut(machine, seq, copy) } : {}),
    receipt: (log, seq) => {
      const shelf = shelfByLog.get(log);
      return shelf === undefined ? undefined : paths.shelfEntry(shelf, seq);
    },
  };
}
