import 'server-only';
import type { StoredLog } from '@/db/queries/entries';
import { struckLines } from '@/lib/domain/standing';
import { openDisclosure } from '@/lib/evidence/disclosure';
import type { Attachment, AuthorPart, EntryKind, Leaf, NotesPart, PartName } from '@/lib/evidence/format';
import { parseLeaf } from '@/lib/evidence/leaf';
import { keyOfNote } from '@/lib/services/log-keys';
import type { ErasureView, LogView, StruckView } from '@/lib/services/record-view';
import { type StampsOfEntry, stampsOfLog } from '@/lib/services/stamps-of-log';

/** A line of a log with the parts that are to be shown. */
export interface OpenedEntry extends StampsOfEntry {
  leaf: Leaf;
  leafHash: string;
  kind: EntryKind;
  /** What each opened part says. */
  values: Map<PartName, unknown>;
  /** Named in the leaf and kept back here. */
  withheld: PartName[];
  /** Named in the leaf and destroyed for good, each with the entry that says so. */
  erasures: ErasureView[];
  /** The strike that withdraws it, if one stands. */
  struckBy: StruckView | null;
}

/** Opens the parts of every line that `isOpen` lets through. */
export function openStoredLog(
  stored: StoredLog,
  isOpen: (part: PartName, seq: number) => boolean = () => true,
): OpenedEntry[] {
  const valuesBySeq = new Map<number, Map<PartName, unknown>>();
  for (const { seq, name, disclosure } of stored.parts) {
    const part = name as PartName;
    if (!isOpen(part, seq)) continue;
    const values = valuesBySeq.get(seq) ?? new Map<PartName, unknown>();
    valuesBySeq.set(seq, values.set(part, openDisclosure(disclosure).value));
  }
  const stamps = stampsOfLog(stored);
  const opened = stored.entries.map((row): OpenedEntry => {
    const leaf = parseLeaf(row.leaf);
    const values = valuesBySeq.get(row.seq) ?? new Map<PartName, unknown>();
    const erasures = erasuresOf(stored, row.seq);
    const isErased = (name: PartName) => erasures.some((one) => one.name === name);
    const closed = leaf.parts.map(({ name }) => name).filter((name) => !values.has(name));
    const withheld = closed.filter((name) => !isErased(name));
    return {
      leaf,
      leafHash: row.leafHash,
      kind: leaf.kind,
      values,
      withheld,
      erasures,
      ...(stamps.get(row.seq) ?? { tokens: [], stampsToCome: [] }),
      struckBy: null,
    };
  });
  markStruck(opened);
  return opened;
}

/** The same lines with fewer parts opened; a strike's reason is known only where its body is. */
export function keepOpened(opened: OpenedEntry[], isOpen: (part: PartName, seq: number) => boolean): OpenedEntry[] {
  const kept = opened.map((entry): OpenedEntry => {
    const values = new Map([...entry.values].filter(([part]) => isOpen(part, entry.leaf.seq)));
    const closed = [...entry.values.keys()].filter((part) => !values.has(part));
    return { ...entry, values, withheld: [...entry.withheld, ...closed].sort(), struckBy: null };
  });
  markStruck(kept);
  return kept;
}

export function logView({ log, checkpoints }: StoredLog): LogView {
  const last = checkpoints.at(-1);
  if (last === undefined) throw new Error(`The log ${log.id} has no checkpoint.`);
  const { id, origin, keyName, timesInjected } = log;
  const { size, root, note } = last;
  return { id, origin, keyName, timesInjected, size, root, checkpoint: note, ...keyOfNote(note) };
}

function erasuresOf({ erasures }: StoredLog, seq: number): ErasureView[] {
  return erasures
    .filter((row) => row.seq === seq)
    .map(({ name, erasedAt, recordedSeq }) => ({ name: name as PartName, erasedAt, recordedSeq }));
}

export function authorOf({ values }: OpenedEntry): AuthorPart | null {
  return (values.get('author') as AuthorPart | undefined) ?? null;
}

export function attachmentsOf({ values }: OpenedEntry): Attachment[] {
  return (values.get('attachments') as Attachment[] | undefined) ?? [];
}

export function notesOf({ values }: OpenedEntry): string | null {
  return (values.get('notes') as NotesPart | undefined)?.text ?? null;
}

function markStruck(opened: OpenedEntry[]): void {
  const kinds = opened.map(({ leaf, kind }) => ({ seq: leaf.seq, kind, refersToSeq: leaf.refersTo?.seq ?? null }));
  for (const [seq, by] of struckLines(kinds)) {
    const [target, strike] = [opened[seq], opened[by]];
    if (target === undefined || strike === undefined) continue;
    const reason = (strike.values.get('body') as { reason?: string } | undefined)?.reason ?? '';
    const who = authorOf(strike)?.name;
    target.struckBy = { seq: by, sealedAt: strike.leaf.sealedAt, reason, ...(who === undefined ? {} : { by: who }) };
  }
}
