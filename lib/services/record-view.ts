import type {
  Attachment,
  AuthorPart,
  CountersignatureBody,
  EntryKind,
  IdentityPart,
  OpeningBody,
  PartName,
  PricesPart,
  PurchaseBody,
  Reference,
  ServiceBody,
  ShelfOpeningBody,
  SupplierPart,
  TermsBody,
} from '@/lib/evidence/format';
import type { StatementFinding } from '@/lib/evidence/verify-statements';

/** What pages, viewing links and the packet read: one shape, made from the leaves and from nothing else. */
export interface RecordView {
  machine: { id: string; name: string; make: string; model: string; modelYear?: string; kind: string };
  /** Null when the identity part is withheld. */
  identity: IdentityPart | null;
  opening: OpeningBody;
  /** Newest sealed terms, and every terms entry by its seq. */
  terms: TermsBody | null;
  termsBySeq: Map<number, TermsBody>;
  log: LogView;
  /** Ascending by seq. */
  entries: EntryView[];
  /** The shelf logs this machine's opened entries draw from, and the purchases drawn, ascending. */
  shelves: { log: LogView; purchases: PurchaseView[]; size: number; partsWithheld: number }[];
}

export interface LogView {
  id: string;
  origin: string;
  keyName: string;
  timesInjected: boolean;
  size: number;
  /** Base64 root and the newest signed note. */
  root: string;
  checkpoint: string;
  verifierKey: string;
  fingerprint: string;
}

/** A body by its kind, with people by name as far as that is opened; null when the body is withheld. */
export type BodyOf =
  | { kind: 'opening'; body: OpeningBody | null }
  | { kind: 'terms'; body: TermsBody | null }
  | { kind: 'service'; body: ServiceBody | null }
  | { kind: 'countersignature'; body: CountersignatureBody | null }
  | { kind: Exclude<EntryKind, 'opening' | 'terms' | 'service' | 'countersignature'>; body: unknown };

/** Somebody who stands by another entry, in an entry of their own. */
export interface SignedBy {
  seq: number;
  sealedAt: string;
  author: AuthorPart | null;
  ownSignature?: StatementFinding;
}

export type EntryView = BodyOf & {
  seq: number;
  /** The words a ledger line shows: what was done. */
  title: string;
  sealedAt: string;
  leafHash: string;
  previous: string | null;
  refersTo: Reference | null;
  author: AuthorPart | null;
  attachments: Attachment[];
  notes: string | null;
  /** Kept back from this reader. */
  withheld: PartName[];
  /** Destroyed for good; `erasures` says when, and which entry records it. */
  erased: PartName[];
  erasures: ErasureView[];
  tokens: TokenView[];
  /** Authorities whose stamp over this entry is still to come. */
  stampsToCome: string[];
  countersignatures: (SignedBy & { body: CountersignatureBody })[];
  /** What was found about the signature made outside the server that this entry carries; absent if it carries none. */
  ownSignature?: StatementFinding;
  /** Those who signed this entry outside the server, in entries of their own; absent if nobody did. */
  signedBy?: SignedBy[];
  struckBy: StruckView | null;
  addenda: number[];
  state: 'sealed' | 'countersigned' | 'waiting' | 'struck';
};

/** The strike that withdraws an entry; its reason is empty where it is withheld. */
export interface StruckView {
  seq: number;
  sealedAt: string;
  reason: string;
  /** Name of who struck it, where that is not withheld. */
  by?: string;
}

/** A part that was destroyed, with the entry of the same log that says so. */
export interface ErasureView {
  name: PartName;
  /** UTC, milliseconds. */
  erasedAt: string;
  recordedSeq: number;
}

export interface TokenView {
  authority: string;
  genTime: string;
  isOwnAuthority: boolean;
  /** Its chain ends in a root that this installation trusts. Readers decide by roots of their own. */
  isIndependent: boolean;
  rootName: string | null;
  sha256: string;
}

export interface PurchaseView {
  log: string;
  seq: number;
  leafHash: string;
  sealedAt: string;
  body: PurchaseBody;
  supplier: SupplierPart | null;
  prices: PricesPart | null;
  author: AuthorPart | null;
  attachments: Attachment[];
  tokens: TokenView[];
  /** Seqs of this machine's entries that draw from it, struck ones too. */
  usedBy: number[];
  withheld?: PartName[];
  erasures?: ErasureView[];
  /** A strike on the shelf's log that withdraws the purchase. */
  struckBy?: StruckView | null;
  /** What later lines of the shelf's log say of it, ascending. */
  corrections: CorrectionView[];
}

/** A later line of a shelf's log about a purchase: a correction, a blacked-out copy, or that a part was erased. */
export interface CorrectionView {
  seq: number;
  sealedAt: string;
  leafHash: string;
  /** Null where it is withheld. */
  why: string | null;
  author: AuthorPart | null;
  attachments: Attachment[];
  struckBy: StruckView | null;
}

export interface ShelfEntryView {
  log: string;
  seq: number;
  kind: EntryKind;
  sealedAt: string;
  leafHash: string;
  tokens: TokenView[];
  opening?: ShelfOpeningBody;
  purchase?: PurchaseView;
  /** The body of every other kind: disposal, correction, strike, handover. Undefined when withheld. */
  body?: unknown;
  author?: AuthorPart | null;
  refersTo?: Reference | null;
  /** The strike on the same log that withdraws it. */
  struckBy?: StruckView | null;
  /** Named in the leaf and kept back. */
  withheld?: PartName[];
  erasures?: ErasureView[];
  /** Pictures of a line that is no purchase. */
  attachments?: Attachment[];
  /** Parts the line has that are still there. */
  parts?: PartName[];
}
