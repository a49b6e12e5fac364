import type { Attachment, AttachmentRole, TermsBody } from '@/lib/evidence/format';
import type { EntryView, LogView, PurchaseView } from '@/lib/services/record-view';

/** What a page knows of the record around one entry. */
export interface EntryFacts {
  /** IANA name; times of the server are shown in it. */
  zone: string;
  log: LogView;
  /** The purchases the record draws from. */
  purchases: PurchaseView[];
  termsBySeq: Map<number, TermsBody>;
  /** The whole record, where this reader has it: what was added to the entry is then shown under it. */
  entries?: EntryView[];
}

export type FileKind = 'thumb' | 'plate' | 'copy' | 'original';

/** Addresses differ by who reads; undefined where this reader has none. */
export interface EntryLinks {
  /** `sha256` is the original's. */
  file: (sha256: string, kind: FileKind) => string | undefined;
  entry?: (seq: number) => string | undefined;
  receipt?: (log: string, seq: number) => string | undefined;
  /** Where a part of a picture of an entry can be blacked out; for owners. `copy` is the SHA-256 of its shared copy. */
  blackOut?: (seq: number, copy: string) => string;
}

/** The pictures of a receipt that this reader gets: its own, and blacked-out copies made later that stand. */
export function platesOfPurchase({ attachments, corrections }: PurchaseView): Attachment[] {
  const later = corrections.filter(({ struckBy }) => struckBy === null);
  return [...attachments, ...later.flatMap((one) => one.attachments)];
}

/** Roles shown first: what the work looked like, then papers. */
export const plateOrder: AttachmentRole[] = [
  'odometer',
  'as-found',
  'magnet',
  'part',
  'as-left',
  'work-order',
  'lab-report',
  'manual-page',
  'document',
  'receipt-front',
  'receipt-back',
  'receipt-page',
];
