import type { Scope } from '@/lib/domain/scope';
import type { Attachment } from '@/lib/evidence/format';
import type { PageSigner } from '@/lib/ports/sign-pages';
import type { EntryView, PurchaseView, RecordView } from '@/lib/services/record-view';
import type { Source } from './layer/file-stream';
import type { JpegSize } from './layer/jpeg';

/** A file that goes into the packet: attached under `name`, and drawn when `size` is known. */
export interface PacketFile {
  sha256: string;
  name: string;
  mediaType: string;
  source: Source;
  /** Null: attached, but not a picture that can be drawn as it is. */
  size: JpegSize | null;
}

/** All a packet is drawn from. Nothing is read from anywhere else while it is drawn. */
export interface PacketContent {
  record: RecordView;
  /** `record.json`, whole. */
  recordJson: string;
  number: string;
  purpose: string;
  /** UTC instant. */
  madeAt: string;
  /** The zone in which instants are written out. */
  zone: string;
  /** Null where names stay closed. */
  owner: string | null;
  /** What is opened. */
  scope: Scope;
  /** The packet's own viewing link; null when it has none. */
  link: string | null;
  /** Where people reach this installation. */
  site: string;
  /** Signs the file; record.json names its certificate. */
  signer: PageSigner;
  /** By SHA-256 of the shared copy. */
  files: Map<string, PacketFile>;
}

/** Short for a purchase, told apart from the machine's own entries: R14. */
export const receiptName = (purchase: { seq: number }): string => `R${purchase.seq}`;

export const entryAnchor = (seq: number): string => `entry-${seq}`;
export const receiptAnchor = (purchase: { log: string; seq: number }): string =>
  `receipt-${purchase.log}-${purchase.seq}`;

function extensionOf(mediaType: string): string {
  const known: Record<string, string> = { 'image/jpeg': 'jpg', 'image/png': 'png', 'image/webp': 'webp' };
  return known[mediaType] ?? 'bin';
}

/**
 * The shared copies a packet takes along, by their SHA-256, with the names they are attached under: the entry's number,
 * the attachment's, its role, and the start of its hash. A copy that several entries hold is attached once.
 */
export function nameFiles(record: RecordView): Map<string, { name: string; mediaType: string; bytes: number }> {
  const named = new Map<string, { name: string; mediaType: string; bytes: number }>();
  const take = (prefix: string, attachments: Attachment[]) => {
    attachments.forEach(({ role, copy }, i) => {
      if (copy === undefined || named.has(copy.sha256)) return;
      const { sha256, mediaType, bytes } = copy;
      const name = `${prefix}-${i + 1}-${role}-${sha256.slice(0, 8)}.${extensionOf(mediaType)}`;
      const isTaken = [...named.values()].some((other) => other.name === name);
      named.set(sha256, { name: isTaken ? name.replace(sha256.slice(0, 8), sha256) : name, mediaType, bytes });
    });
  };
  for (const { seq, attachments } of record.entries) take(String(seq), attachments);
  for (const { purchases } of record.shelves) {
    for (const { seq, attachments, corrections } of purchases) {
      take(`receipt-${seq}`, attachments);
      for (const later of corrections) take(`receipt-${later.seq}`, later.attachments);
    }
  }
  return named;
}

export const purchasesOf = (record: RecordView): PurchaseView[] => record.shelves.flatMap(({ purchases }) => purchases);

export type ServiceEntry = Extract<EntryView, { kind: 'service' }>;
export const isService = (entry: EntryView): entry is ServiceEntry => entry.kind === 'service';

/** Every log in the packet whose times were injected makes the whole packet a demo. */
export const areTimesInjected = (record: RecordView): boolean =>
  record.log.timesInjected || record.shelves.some(({ log }) => log.timesInjected);
