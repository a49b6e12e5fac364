import 'server-only';
import { judgeStatements } from '@/lib/evidence/verify-statements';
import { authorOf, type OpenedEntry } from '@/lib/services/open-stored-log';
import type { EntryView } from '@/lib/services/record-view';

/**
 * The entries of a log with what was found about signatures that were made outside the server: at the entry that
 * carries one, at its countersignatures, and at those who signed it. Judged as any reader's check judges it.
 */
export function withOwnSignatures(views: EntryView[], opened: readonly OpenedEntry[]): EntryView[] {
  const log = opened[0]?.leaf.log ?? '';
  const lines = opened.map(({ leaf, leafHash, kind, values }) => {
    const { seq, refersTo } = leaf;
    return { seq, leafHash, kind, refersTo, body: values.get('body'), author: values.get('author') };
  });
  const found = judgeStatements(log, lines);
  if (found.size === 0) return views;
  const at = (seq: number) => {
    const ownSignature = found.get(seq);
    return ownSignature === undefined ? {} : { ownSignature };
  };
  return views.map((view): EntryView => {
    const signing = opened.filter(
      ({ kind, leaf, struckBy }) => kind === 'signature' && leaf.refersTo?.seq === view.seq && struckBy === null,
    );
    const signedBy = signing.map((entry) => {
      const { seq, sealedAt } = entry.leaf;
      return { seq, sealedAt, author: authorOf(entry), ...at(seq) };
    });
    const countersignatures = view.countersignatures.map((one) => ({ ...one, ...at(one.seq) }));
    return { ...view, countersignatures, ...at(view.seq), ...(signedBy.length === 0 ? {} : { signedBy }) };
  });
}
