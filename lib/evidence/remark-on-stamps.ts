import type { Stamp } from '@/lib/evidence/finding';
import type { Findings } from '@/lib/evidence/findings';
import type { StampTrust } from '@/lib/evidence/stamp-trust';
import type { WalkedLine, WalkedLog } from '@/lib/evidence/verify-log';

/** A clock may be this much off before it is worth a remark. */
const clockToleranceMilliseconds = 300_000;
const millisecondsInHour = 3_600_000;
/** A stamp later than this after sealing leaves time in which the record could have been rebuilt. */
const promptHours = 72;

/**
 * By seq: the earliest time stamp on this line's seal or any later one, since a later root covers every line before
 * it. A stamp on a seal that does not belong to the lines covers nothing.
 *
 * @param counts which stamps count
 * @example earliestStamps(log, ({ trust }) => trust === 'independent')[0]?.genTime; // the proven time of entry 0
 */
export function earliestStamps(log: WalkedLog, counts: (stamp: Stamp) => boolean = () => true): (Stamp | null)[] {
  const earliest: (Stamp | null)[] = Array.from({ length: log.lines.length }, () => null);
  let best: Stamp | null = null;
  for (const line of log.lines.toReversed()) {
    for (const stamp of line.isSealed ? line.stamps.filter(counts) : []) {
      if (best === null || stamp.genTime < best.genTime) best = stamp;
    }
    earliest[line.seq] = best;
  }
  return earliest;
}

/**
 * By seq: what proves when a line existed at the latest; null where nothing does.
 *
 * @example provenStamps(log)[3]?.genTime; // '2026-04-18T23:32:07.000Z'
 */
export function provenStamps(log: WalkedLog): (Stamp | null)[] {
  return earliestStamps(log, ({ trust }) => trust === 'independent');
}

/**
 * Remarks on lines without a time stamp, on stamps that nobody the reader trusts vouches for, on stamps older than what
 * they cover, and on lines stamped late; and says what of the stamps was not checked.
 *
 * @example remarkOnStamps(logs, trust, findings);
 */
export function remarkOnStamps(logs: readonly WalkedLog[], trust: StampTrust, findings: Findings): void {
  for (const log of logs) {
    remarkOnBareLines(log, findings);
    remarkOnLateLines(log, findings);
    for (const line of log.lines) remarkOnClock(log, line, findings);
  }
  const stamps = logs.flatMap(({ lines }) => lines.flatMap((line) => line.stamps));
  const count = (kind: Stamp['trust']) => stamps.filter((stamp) => stamp.trust === kind).length;
  if (count('own') > 0) {
    const sentence =
      `${timeStamps(count('own'))} of an installation’s own test authority: not independent, and worth no more than the ` +
      'word of whoever runs it.';
    findings.remark('authority-unknown', sentence, { count: count('own') });
  }
  if (count('unknown') > 0) {
    const why = trust.roots.length === 0 ? 'no root was brought to check it by' : 'no root that was brought vouches for it';
    const sentence = `${timeStamps(count('unknown'), 'was', 'were')} made for this record, but by whom was not established: ${why}.`;
    findings.remark('authority-unknown', sentence, { count: count('unknown') });
  }
  sayWhatWasNotChecked(trust, stamps.length, count('independent'), findings);
} // prettier-ignore

function sayWhatWasNotChecked(trust: StampTrust, stamps: number, independent: number, findings: Findings): void {
  if (trust.unreadable > 0) {
    findings.notChecked.push(`${trust.unreadable} of the root certificates brought cannot be read and were not used.`);
  }
  if (stamps > 0 && trust.roots.length === 0) {
    findings.notChecked.push(
      'Whether a time stamp is independent: no root certificate was brought, and this check ships none. Get the ' +
        'authority’s root (PEM) from the authority itself, never from this file, and check again with it (for the ' +
        'command: --tsa-roots PEM).',
    );
  }
  if (independent > 0) {
    findings.notChecked.push(
      'Whether an authority withdrew a certificate: nothing is fetched from the network. Ask the authority if in doubt.',
    );
  }
}

function remarkOnBareLines(log: WalkedLog, findings: Findings): void {
  const earliest = earliestStamps(log);
  const bare = log.lines.filter((line) => earliest[line.seq] == null);
  if (bare.length === 0) return;
  const sentence =
    `${bare.length} of ${log.lines.length} entries of the ${log.source.subject}’s log are covered by no time stamp: ` +
    'their times are the word of the installation alone.';
  findings.remark('not-time-stamped', sentence, { log: log.source.id, count: bare.length });
}

/** One remark a log, since one late stamp covers every line before it. */
function remarkOnLateLines(log: WalkedLog, findings: Findings): void {
  const proven = provenStamps(log);
  const late = log.lines.flatMap(({ seq, leaf }) => {
    const stamp = proven[seq];
    if (stamp == null || leaf === null) return [];
    const hours = (Date.parse(stamp.genTime) - Date.parse(leaf.sealedAt)) / millisecondsInHour;
    return hours > promptHours ? [{ seq, hours }] : [];
  });
  const [first] = late;
  if (first === undefined) return;
  const most = Math.floor(Math.max(...late.map(({ hours }) => hours)) / 24);
  const named = late.length === 1 ? `Entry ${first.seq} is` : `${late.length} entries of the ${log.source.subject}’s log are`;
  const sentence =
    `${named} proven only for a time more than ${promptHours} hours after sealing, up to ${most} days: until then, ` +
    'whoever runs the installation could have written them anew.';
  const place = late.length === 1 ? { log: log.source.id, seq: first.seq } : { log: log.source.id };
  findings.remark('stamped-late', sentence, { ...place, count: late.length });
} // prettier-ignore

function remarkOnClock(log: WalkedLog, { seq, leaf, stamps }: WalkedLine, findings: Findings): void {
  if (leaf === null) return;
  const sealed = Date.parse(leaf.sealedAt) - clockToleranceMilliseconds;
  const early = stamps.find((stamp) => Date.parse(stamp.genTime) < sealed);
  if (early === undefined) return;
  const sentence = `Entry ${seq} was stamped at ${early.genTime}, before the time at which it says it was sealed.`;
  findings.remark('clock-off', sentence, { log: log.source.id, seq });
}

const timeStamps = (count: number, is = 'is', are = 'are'): string =>
  count === 1 ? `1 time stamp ${is}` : `${count} time stamps ${are}`;
