import { isJsonObject } from '@/lib/evidence/canonical';
import type { DeviceSignature, EntryFinding, LogFinding } from '@/lib/evidence/finding';
import type { Findings } from '@/lib/evidence/findings';
import type { LocalMoment } from '@/lib/evidence/format';
import { earliestStamps, provenStamps } from '@/lib/evidence/remark-on-stamps';
import type { OpenedLog } from '@/lib/evidence/verify-references';

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
    const [earliest, proven] = [earliestStamps(log), provenStamps(log)];
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
        proven: proven[line.seq] ?? null,
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

function claimedTimes(body: unknown): EntryFinding['claimed'] {
  if (!isJsonObject(body)) return undefined;
  const [startedAt, finishedAt] = [body.startedAt, body.finishedAt ?? body.boughtOn];
  if (!isMoment(startedAt) && !isMoment(finishedAt)) return undefined;
  return { ...(isMoment(startedAt) ? { startedAt } : {}), ...(isMoment(finishedAt) ? { finishedAt } : {}) };
}

function isMoment(value: unknown): value is LocalMoment {
  return isJsonObject(value) && typeof value.date === 'string' && typeof value.zone === 'string';
}
