import { struckLines } from '@/lib/domain/standing';
import type { AboutLines } from '@/lib/evidence/about-lines';
import type { EntryFinding } from '@/lib/evidence/finding';

/** What later lines did to a line. */
export interface LaterLines {
  struckBy: number | null;
  countersignedBy: number[];
}

/** By seq, for the lines of one log: which lines strike or countersign it. A line with a problem does neither. */
export function laterLines(entries: EntryFinding[], about: AboutLines): Map<number, LaterLines> {
  const sound = entries.filter(({ problems }) => problems.length === 0);
  const refersToSeq = ({ log, seq }: EntryFinding) => about[`${log}/${seq}`] ?? null;
  const struck = struckLines(sound.map((entry) => ({ seq: entry.seq, kind: entry.kind ?? '', refersToSeq: refersToSeq(entry) })));
  const later = new Map<number, LaterLines>();
  const at = (seq: number) => {
    const known = later.get(seq) ?? { struckBy: struck.get(seq) ?? null, countersignedBy: [] };
    later.set(seq, known);
    return known;
  };
  for (const seq of struck.keys()) at(seq);
  for (const entry of sound) {
    const seq = refersToSeq(entry);
    if (entry.kind === 'countersignature' && seq !== null && !struck.has(entry.seq)) at(seq).countersignedBy.push(entry.seq);
  }
  return later;
} // prettier-ignore
