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

/** What a time-stamp token says of itself. Who made it is not established here. */
export interface Stamp {
  /** UTC instant. */
  genTime: string;
  /** Hex. */
  serial: string;
  /** Dotted object identifier. */
  policy: string;
  /** Size of the checkpoint it stands on: it covers every line of a lower number. */
  size: number;
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
  /** What this check did not look at, each a sentence. */
  notChecked: string[];
}
