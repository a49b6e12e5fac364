import 'server-only';
import { purchaseOfLine } from '@/lib/domain/shelf-scope';
import type { PricesPart, PurchaseBody, SupplierPart } from '@/lib/evidence/format';
import { attachmentsOf, authorOf, type OpenedEntry } from '@/lib/services/open-stored-log';
import type { CorrectionView, PurchaseView } from '@/lib/services/record-view';

/** The purchases of a shelf's log whose bodies are opened, each with what later lines of the log say of it. */
export function purchaseViews(entries: OpenedEntry[], usedBy?: ReadonlyMap<number, number[]>): PurchaseView[] {
  const said = saidOfPurchases(entries);
  return entries.flatMap((entry) => {
    const { seq } = entry.leaf;
    return entry.kind === 'purchase'
      ? (purchaseView(entry, usedBy?.get(seq) ?? [], (said.get(seq) ?? []).filter(isCorrection)) ?? [])
      : [];
  });
}

/** Seq of a purchase → corrections and strikes about it, about those, and so on; ascending. */
export function saidOfPurchases(entries: OpenedEntry[]): Map<number, OpenedEntry[]> {
  const purchases = purchaseOfLine(
    entries.map(({ leaf, kind }) => ({ seq: leaf.seq, kind, refersTo: leaf.refersTo?.seq ?? null })),
  );
  const said = new Map<number, OpenedEntry[]>();
  for (const entry of entries) {
    const purchase = purchases.get(entry.leaf.seq);
    if (purchase === undefined || purchase === entry.leaf.seq) continue;
    said.set(purchase, [...(said.get(purchase) ?? []), entry]);
  }
  return said;
}

const isCorrection = ({ kind }: OpenedEntry): boolean => kind === 'correction';

/** Null when the body is withheld or erased: then nothing can be said of what was bought. */
function purchaseView(entry: OpenedEntry, usedBy: number[], corrections: OpenedEntry[]): PurchaseView | null {
  const { leaf, leafHash, values, withheld, erasures, tokens, struckBy } = entry;
  const body = values.get('body') as PurchaseBody | undefined;
  if (body === undefined) return null;
  return {
    log: leaf.log,
    seq: leaf.seq,
    leafHash,
    sealedAt: leaf.sealedAt,
    body,
    supplier: (values.get('supplier') as SupplierPart | undefined) ?? null,
    prices: (values.get('prices') as PricesPart | undefined) ?? null,
    author: authorOf(entry),
    attachments: attachmentsOf(entry),
    tokens,
    usedBy,
    withheld,
    erasures,
    struckBy,
    corrections: corrections.map(correctionView),
  };
}

function correctionView(entry: OpenedEntry): CorrectionView {
  const { leaf, leafHash, values, struckBy } = entry;
  const { why } = (values.get('body') ?? {}) as { why?: string };
  return {
    seq: leaf.seq,
    sealedAt: leaf.sealedAt,
    leafHash,
    why: why ?? null,
    author: authorOf(entry),
    attachments: attachmentsOf(entry),
    struckBy,
  };
}
