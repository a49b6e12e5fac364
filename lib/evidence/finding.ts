import type { AlterationCode, RemarkCode } from '@/lib/evidence/codes';
import type { EntryKind, LocalMoment, PartName } from '@/lib/evidence/format';

/** `unreadable` only if there is no bundle to read; whatever is wrong inside one makes it `altered`. */
export type Outcome = 'unchanged' | 'altered' | 'unreadable';

/** Where in the record something was found. */
export interface Place {
  log?: string;
  seq?: number;
  part?: string;
}
/** Something that is not as it was sealed. `sentence` is for whoever decides, `technical` for whoever looks closer. */
export interface Alteration extends Place {
  code: AlterationCode;
  sentence: string;
  technical: string;
}
/** Something to know that alters nothing. */
export interface Remark extends Place {
  code: RemarkCode;
  sentence: string;
  /** How many parts, files or entries it is about. */
  count?: number;
}

/** A time-stamp token over a signed checkpoint, and what was established about who made it. */
export interface Stamp {
  /** UTC instant. */
  genTime: string;
  /** Hex. */
  serial: string;
  /** Dotted object identifier. */
  policy: string;
  /** Size of the checkpoint it stands on: it covers every line of a lower number. */
  size: number;
  /** Hex SHA-256 of the token's DER. */
  sha256: string;
  /** Common name in the certificate that signed it, which anybody can choose; null if it names none. */
  signer: string | null;
  /**
   * `independent`: its chain, valid at its time, ends in a root that the reader or this verifier brought; `own`: in the
   * installation's own test authority; `unknown`: it holds, and no root that was brought vouches for it.
   */
  trust: 'independent' | 'own' | 'unknown';
  /** The root an independent one ends in, and the hex SHA-256 of that certificate. */
  root: { name: string; sha256: string } | null;
}

/** A signature made on a person's own device, outside the server (a passkey). */
export interface DeviceSignature {
  /** Hex SHA-256 of the public key (SPKI). */
  keyFingerprint: string;
  /** The earlier `key` entry that names the key, and the person it names. */
  keySeq: number;
  person: string;
  /** The site on which the signer approved. */
  site: string;
  /** The entry whose words are signed: this one for a countersignature, the one referred to for a `signature`. */
  signs: number;
}

export interface EntryFinding {
  log: string;
  /** Its place in the log, as found. */
  seq: number;
  leafHash: string;
  /** Null if the line cannot be read. */
  kind: EntryKind | null;
  sealedAt: string | null;
  /** What the entry says of itself, if its body is opened. */
  claimed?: { startedAt?: LocalMoment; finishedAt?: LocalMoment };
  /** Only parts that are exactly what was sealed. */
  openedParts: { name: PartName; value: unknown }[];
  withheldParts: PartName[];
  /** The time stamps on this entry's own seal. */
  stampedBy: Stamp[];
  /** The time stamp that covers this entry and claims the earliest time, on whichever seal it hangs. */
  earliestStamp: Stamp | null;
  /** Its proven time: the earliest independent stamp over any seal that covers it. Null: not proven. */
  proven: Stamp | null;
  /** A signature made outside the server that this entry carries and that holds. */
  deviceSignature: DeviceSignature | null;
  problems: AlterationCode[];
}

export interface LogFinding {
  id: string;
  subject: 'machine' | 'shelf';
  origin: string;
  /** Size and root as signed; null if the note cannot be read. */
  checkpoint: { size: number; root: string; note: string } | null;
}

/**
 * The root in the spelling of the signed note, base64, as packets, pages and mails print it.
 *
 * @example signedRoot(checkpoint); // '+r/He3gP+nV4P7tKP/FUTmCTfAqQa842aKi3oKrM/AQ='
 */
export function signedRoot({ note, root }: NonNullable<LogFinding['checkpoint']>): string {
  return note.split('\n')[2] ?? root;
}

/** The answer to `against`: what an older file of the same record says. */
export interface Comparison {
  result: 'consistent' | 'forked' | 'shorter' | 'not-comparable';
  sentence: string;
  /** Both signed notes, kept when they contradict each other. */
  notes: { log: string; older: string; newer: string }[];
}

/** Everything that checking a record found. */
export interface Finding {
  outcome: Outcome;
  /** One sentence that sums it up. */
  sentence: string;
  alterations: Alteration[];
  remarks: Remark[];
  entries: EntryFinding[];
  logs: LogFinding[];
  counts: {
    entries: number;
    /** Entries whose body is opened. */
    entriesOpened: number;
    partsOpened: number;
    partsWithheld: number;
  };
  /** The key it was checked with. */
  key: { verifierKey: string; name: string; fingerprint: string; source: 'reader' | 'file' } | null;
  /** Of the bundle, as written in it; null if it cannot be read. */
  bundle: { madeAt: string; purpose: string; number: string } | null;
  against: Comparison | null;
  /** The pages of a packet: not there at all, not signed, as they were signed, or changed since. */
  pages: 'none' | 'not-checked' | 'checked' | 'changed';
  /** What this check did not look at, each a sentence. */
  notChecked: string[];
}
