import { isJsonObject } from '@/lib/evidence/canonical';
import type { DeviceSignature, EntryFinding, LogFinding, Stamp } from '@/lib/evidence/finding';
import type { Findings } from '@/lib/evidence/findings';
import type { LocalMoment } from '@/lib/evidence/format';
import type { OpenedLog } from '@/lib/evidence/verify-references';

/** A clock may be this much off before it is worth a remark. */
const clockToleranceMinutes = 5;
const millisecondsInMinute = 60_000;

/**
 * What was found at each entry, log by log and in order. `statements` are the signatures made outside the server that
 * hold, by `<log>/<seq>`.
 *
 * @example describeEntries(logs, findings)[0]?.kind; // 'opening'
 */
export function describeEntries(
  logs: OpenedLog[],
  findings: Findings,
  statements: ReadonlyMap<string, DeviceSignature> = new Map(),
): EntryFinding[] {
  return logs.flatMap((log) => {
    const earliest = earliestStamps(log);
    return log.lines.map((line): EntryFinding => {
      const parts = log.parts[line.seq];
      const claimed = claimedTimes(parts?.opened.get('body'));
      return {
        log: log.source.id,
        seq: line.seq,
        leafHash: line.hash,
        kind: line.leaf?.kind ?? null,
        sealedAt: line.leaf?.sealedAt ?? null,
        ...(claimed === undefined ? {} : { claimed }),
        openedParts: [...(parts?.opened ?? [])].map(([name, value]) => ({ name, value })),
        withheldParts: parts?.withheld ?? [],
        stampedBy: line.stamps,
        earliestStamp: earliest[line.seq] ?? null,
        proven: null,
        deviceSignature: statements.get(`${log.source.id}/${line.seq}`) ?? null,
        problems: findings.problemsOf(log.source.id, line.seq),
      };
    });
  });
}

/**
 * Each log with its signed size and root.
 *
 * @example describeLogs(logs)[0]?.checkpoint?.size; // 12
 */
export function describeLogs(logs: OpenedLog[]): LogFinding[] {
  return logs.map(({ source, checkpoint }) => ({
    id: source.id,
    subject: source.subject,
    origin: source.origin,
    checkpoint: checkpoint && { size: checkpoint.size, root: checkpoint.root, note: source.checkpoint },
  }));
}

/**
 * Remarks on lines without a time stamp and on stamps older than what they cover, and says that nobody looked at who
 * made them.
 *
 * @example remarkOnStamps(logs, findings);
 */
export function remarkOnStamps(logs: OpenedLog[], findings: Findings): void {
  let stamps = 0;
  for (const log of logs) {
    const earliest = earliestStamps(log);
    const bare = log.lines.filter((line) => earliest[line.seq] == null);
    if (bare.length > 0) {
      const sentence =
        `${bare.length} of ${log.lines.length} entries of the ${log.source.subject}’s log are covered by no time stamp: ` +
        'their times are the word of the installation alone.';
      findings.remark('not-time-stamped', sentence, { log: log.source.id, count: bare.length });
    }
    for (const line of log.lines) {
      stamps += line.stamps.length;
      if (line.leaf === null) continue;
      const sealed = Date.parse(line.leaf.sealedAt) - clockToleranceMinutes * millisecondsInMinute;
      const early = line.stamps.find((stamp) => Date.parse(stamp.genTime) < sealed);
      if (early === undefined) continue;
      const sentence = `Entry ${line.seq} was stamped at ${early.genTime}, before the time at which it says it was sealed.`;
      findings.remark('clock-off', sentence, { log: log.source.id, seq: line.seq });
    }
  }
  if (stamps === 0) return;
  findings.remark(
    'authority-unknown',
    'The time stamps belong to this record, but who made them was not established.',
    {
      count: stamps,
    },
  );
  findings.notChecked.push(
    'Time-stamp trust not checked: the signature, certificate and independence of each time stamp.',
  );
}

/**
 * Remarks on parts that are closed.
 *
 * @example remarkOnWithheld(logs, findings);
 */
export function remarkOnWithheld(logs: OpenedLog[], findings: Findings): void {
  const names = new Map<string, number>();
  for (const name of logs.flatMap((log) => log.parts.flatMap((parts) => parts.withheld))) {
    names.set(name, (names.get(name) ?? 0) + 1);
  }
  const count = [...names.values()].reduce((total, one) => total + one, 0);
  if (count === 0) return;
  const list = [...names].map(([name, times]) => `${name} ${times}×`).join(', ');
  findings.remark('withheld', `${count} ${count === 1 ? 'part is' : 'parts are'} withheld: ${list}.`, { count });
}

/** By seq: the earliest genTime on this line's seal or any later one, since a later root covers every line before it. */
function earliestStamps(log: OpenedLog): (Stamp | null)[] {
  const earliest: (Stamp | null)[] = Array.from({ length: log.lines.length }, () => null);
  let best: Stamp | null = null;
  for (let seq = log.lines.length - 1; seq >= 0; seq -= 1) {
    for (const stamp of log.lines[seq]?.stamps ?? []) {
      if (best === null || stamp.genTime < best.genTime) best = stamp;
    }
    earliest[seq] = best;
  }
  return earliest;
}

function claimedTimes(body: unknown): EntryFinding['claimed'] {
  if (!isJsonObject(body)) return undefined;
  const [startedAt, finishedAt] = [body.startedAt, body.finishedAt ?? body.boughtOn];
  if (!isMoment(startedAt) && !isMoment(finishedAt)) return undefined;
  return { ...(isMoment(startedAt) ? { startedAt } : {}), ...(isMoment(finishedAt) ? { finishedAt } : {}) };
}

function isMoment(value: unknown): value is LocalMoment {
  return isJsonObject(value) && typeof value.date === 'string' && typeof value.zone === 'string';
}
