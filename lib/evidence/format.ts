/**
 * The shapes of evidence format version 1, as TypeScript types.
 *
 * Members that do not apply are omitted, never null, inside a body. Every measured or counted amount is a decimal
 * string as entered beside a UCUM code; the only JSON numbers are `seq`, `termsSeq`, `line`, `instrument`, `bytes`
 * and `containers`.
 */

/** A decimal as entered, decimal mark made a point, trailing zeros kept: `4.25`, `30`, `0.50`. */
export type DecimalString = string;

/** The UCUM codes a record may use. See `lib/domain/units.ts` for what people see. */
export const unitCodes = [
  'mL', 'L', '[foz_us]', '[pt_us]', '[qt_us]', '[gal_us]', '[foz_br]', '[qt_br]', '[gal_br]',
  'g', '{piece}',
  'N.m', '[ft_i].[lbf_av]', '[in_i].[lbf_av]', 'kgf.m', 'deg',
  'km', '[mi_i]', 'h',
  'kPa', 'bar', '[psi]',
  'mm', '[in_i]', 'Cel', '[degF]', 'V',
] as const; // prettier-ignore
export type UnitCode = (typeof unitCodes)[number];

export interface Amount {
  amount: DecimalString;
  unit: UnitCode;
}
/** An odometer figure. `instrument` counts replaced instruments: 0 is the first one. */
export interface Odometer {
  value: DecimalString;
  unit: UnitCode;
  instrument: number;
}
/** A local moment: `date` YYYY-MM-DD, `time` HH:MM, `zone` an IANA name. */
export interface LocalMoment {
  date: string;
  time?: string;
  zone: string;
}

export const partNames = [
  'attachments', 'author', 'body', 'contact', 'identity', 'notes', 'prices', 'supplier',
] as const; // prettier-ignore
export type PartName = (typeof partNames)[number];

export const machineKinds = [
  'opening', 'service', 'terms', 'reading', 'addendum', 'strike', 'countersignature', 'key', 'signature', 'handover',
] as const; // prettier-ignore
export const shelfKinds = ['opening', 'purchase', 'disposal', 'correction', 'strike', 'handover'] as const;
export type EntryKind = (typeof machineKinds)[number] | (typeof shelfKinds)[number];

export interface Reference {
  seq: number;
  leafHash: string;
}

/** One line of a log. Its RFC 8785 form in UTF-8 is what is hashed. */
export interface Leaf {
  format: 'witnessmark/leaf/1';
  log: string;
  seq: number;
  /** Hex leaf hash of the line before; null at seq 0. */
  previous: string | null;
  kind: EntryKind;
  /** UTC, milliseconds, `Z`. */
  sealedAt: string;
  refersTo: Reference | null;
  /** Sorted by name, each name once. `digest` is base64url, unpadded, of SHA-256 over the disclosure's ASCII. */
  parts: { name: PartName; digest: string }[];
}

// ---- bodies ------------------------------------------------------------------------------------------------

export interface OpeningBody {
  make: string;
  model: string;
  modelYear?: string;
  kindOfMachine: string;
  firstUse?: { on?: string; odometer?: Odometer };
  recordStarts: { on: string; odometer?: Odometer; why: 'new' | 'bought-used' | 'from-paper' | 'continues' };
  continues?: { log: string; checkpoint: string };
}
/** The opening of a shelf's log. */
export interface ShelfOpeningBody {
  name: string;
}
export interface IdentityPart {
  vin?: string;
  frameNumber?: string;
  engineNumber?: string;
}

/** Where a figure comes from. `kind: 'common-practice'` is shown as such until a manual is named. */
export interface Source {
  kind: 'manual' | 'common-practice' | 'owner';
  title?: string;
  edition?: string;
  page?: string;
}
export interface Interval {
  /** Each printed distance in its own unit (5,000 mi and 8,000 km). */
  distances?: Amount[];
  months?: DecimalString;
  hours?: DecimalString;
}
export interface ScheduleItem {
  /** Stable key a task names, e.g. `engine-oil`. */
  item: string;
  title: string;
  action: 'replace' | 'inspect' | 'adjust' | 'clean' | 'lubricate' | 'tighten';
  interval: Interval;
  firstService?: Interval;
  grace?: Interval;
  source: Source;
}
export interface FluidPoint {
  /** Stable key a fill names, e.g. `engine`. */
  point: string;
  title: string;
  /** As printed, in each unit printed. */
  wetFill?: Amount[];
  dryFill?: Amount[];
  startWith?: Amount[];
  grade?: string;
  standard?: string;
  levelPosition?: string;
  levelTemperature?: string;
  source: Source;
}
export interface Fastener {
  fastener: string;
  title: string;
  /** The band as printed: the same band in each unit printed. */
  bands: { min: DecimalString; max: DecimalString; unit: UnitCode }[];
  sequence?: string;
  source: Source;
}
export interface SpecPart {
  part: string;
  title: string;
  partNumbers: string[];
  quantity: DecimalString;
  source: Source;
}
export interface WarrantyTerm {
  term: string;
  title: string;
  kind: 'factory' | 'extended' | 'part';
  startsOn: string;
  months?: DecimalString;
  distances?: Amount[];
  source: Source;
}
/** The sealed snapshot by which later services are judged. */
export interface TermsBody {
  schedule: ScheduleItem[];
  fluidPoints: FluidPoint[];
  fasteners: Fastener[];
  parts: SpecPart[];
  warranty: WarrantyTerm[];
}

export interface Draw {
  purchase: { log: string; seq: number; leafHash: string };
  line: number;
  product: string;
  grade?: string;
  boughtOn: string;
  amount: DecimalString;
  unit: UnitCode;
  balanceBefore: Amount;
  balanceAfter: Amount;
}
export interface Fill {
  point: string;
  pointTitle: string;
  fillKind: 'wet' | 'dry';
  product?: string;
  grade?: string;
  amounts: { amount: DecimalString; unit: UnitCode; step: 'first' | 'top-up' }[];
  /** The specification by which it was judged, copied from the terms. */
  specification?: Amount[];
  draws: Draw[];
  /** What no lot covers, if anything: a gap, not an obstacle. */
  uncovered?: Amount;
}
export interface Torque {
  fastener: string;
  fastenerTitle: string;
  amount: DecimalString;
  unit: UnitCode;
  specification?: { min: DecimalString; max: DecimalString; unit: UnitCode }[];
  tool?: { name: string; calibratedOn?: string };
}
export interface PartUse {
  name: string;
  partNumber?: string;
  quantity: DecimalString;
  draws: Draw[];
  uncovered?: Amount;
}
export interface Inspection {
  subject: string;
  /** `0` to `4` for debris; free words else. */
  grade?: string;
  note?: string;
}
export interface LevelCheck {
  point: string;
  pointTitle: string;
  position?: string;
  temperature?: string;
  reading: string;
}
export interface Task {
  key: string;
  title: string;
  scheduleItem?: string;
  /** Further schedule items the same work did. */
  scheduleItems?: string[];
  action: string;
  steps: { key: string; title: string; doneAt?: string }[];
  inspections: Inspection[];
  fills: Fill[];
  torques: Torque[];
  parts: PartUse[];
  levelChecks: LevelCheck[];
}
export type CheckResult = 'met' | 'gap' | 'not-applicable';
export interface Check {
  key: string;
  result: CheckResult;
  detail: string;
}
export interface ServiceBody {
  termsSeq: number;
  recorded: 'at-the-time' | 'from-paper';
  startedAt?: LocalMoment;
  finishedAt: LocalMoment;
  odometer?: Odometer;
  odometerUnknown?: { why: string };
  engineHours?: DecimalString;
  performedBy: { person: string; capacity: 'owner' | 'helper' | 'shop' | 'dealer'; steps?: string[] }[];
  workOrder?: string;
  title: string;
  tasks: Task[];
  checks: Check[];
  statement: string;
}

export interface PurchaseLine {
  line: number;
  product: string;
  kind: 'fluid' | 'part';
  grade?: string;
  standard?: string;
  partNumber?: string;
  batch?: string;
  /** Fluid: how many containers of `containerSize`. */
  containers?: number;
  containerSize?: Amount;
  /** Parts: how many pieces. */
  quantity?: DecimalString;
}
export interface PurchaseBody {
  boughtOn: LocalMoment;
  lines: PurchaseLine[];
}
export interface SupplierPart {
  name: string;
  address?: string;
}
export interface PricesPart {
  currency: string;
  /** Integer minor units as strings of digits. */
  total?: string;
  lines: { line: number; price: string }[];
}
export interface NotesPart {
  text: string;
}

export const countersignCapacities = ['did-the-work', 'inspected', 'was-present', 'checked-papers'] as const;
export type CountersignCapacity = (typeof countersignCapacities)[number];
export interface CountersignatureBody {
  capacity: CountersignCapacity;
  statement: string;
  shop: {
    name: string;
    address?: string;
    registration?: string;
    /** UTC instant at which the shop's account was made. */
    accountSince: string;
    /** Who confirmed the shop (`steward`), or null: "not confirmed; this could be the owner". */
    confirmedBy: string | null;
  };
  /** UUID of the person who invited the shop, as in the author parts; in earlier entries the name itself. */
  invitedBy: string;
  /** Made by the signer's own key over this body without it, outside the server. */
  signature?: StatementSignature;
}

/**
 * A signature made on a person's own device (WebAuthn, ES256): a member of a countersignature's body, or the whole body
 * of a `signature` entry. Each member is base64url without padding.
 */
export interface StatementSignature {
  /** SubjectPublicKeyInfo in DER, as the `key` entry names it. */
  publicKey: string;
  authenticatorData: string;
  clientDataJSON: string;
  /** ECDSA-Sig-Value in DER. */
  signature: string;
}
/** What a `key` entry says: this is the key of this person. */
export interface KeyBody {
  /** UUID of the person, as in the author parts. */
  person: string;
  /** SubjectPublicKeyInfo in DER, base64url without padding. */
  publicKey: string;
}

export interface AuthorPart {
  person: string;
  name: string;
  role: 'owner' | 'helper' | 'shop';
  sealedBy?: string;
  /** Names of others whom the body names by id, such as a helper who did some of the work. */
  people?: { person: string; name: string }[];
}

export const attachmentRoles = [
  'receipt-front', 'receipt-back', 'receipt-page', 'odometer', 'as-found', 'as-left', 'magnet', 'part', 'manual-page',
  'work-order', 'lab-report', 'document',
] as const; // prettier-ignore
export type AttachmentRole = (typeof attachmentRoles)[number];
export interface Attachment {
  sha256: string;
  bytes: number;
  mediaType: string;
  role: AttachmentRole;
  /** From EXIF: corroboration only. `offset` absent: local time, zone unknown. */
  takenAt?: { local: string; offset?: string };
  /** The server's clock. */
  receivedAt: string;
  caption: string;
  /** The shared copy: no location, maker notes, serials, thumbnail; made before sealing. */
  copy?: { sha256: string; bytes: number; mediaType: string; removed: string[] };
}

// ---- bundle ------------------------------------------------------------------------------------------------

export interface BundleEntry {
  /** The leaf's RFC 8785 text. */
  leaf: string;
  /** Opened disclosures; a part named in the leaf and absent here is withheld. */
  parts: string[];
  seal: { checkpoint: string; tokens: string[] };
}
export interface BundleLog {
  id: string;
  subject: 'machine' | 'shelf';
  origin: string;
  checkpoint: string;
  entries: BundleEntry[];
}
export interface BundleFile {
  sha256: string;
  name: string;
  mediaType: string;
  bytes: number;
  included: boolean;
  derivedFrom: string | null;
}
export interface Bundle {
  format: 'witnessmark/bundle/1';
  madeAt: string;
  purpose: string;
  number: string;
  /** Newest first. */
  verifierKeys: string[];
  packetCertificate: string | null;
  logs: BundleLog[];
  files: BundleFile[];
  signature: string;
}

/** What is said with every proof, always. */
export const whatIsShown =
  'Shown: these statements and pictures existed in this form and order no later than the proven times. ' +
  'Not shown: that a statement was true; that this is the machine’s only record. ' +
  'Without an independent time stamp the times are this installation’s own word, and whoever runs it could have rebuilt the record.';
