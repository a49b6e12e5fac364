import 'server-only';
import { isBlackedOutThroughout } from '@/lib/domain/blacked-out';
import { isLocalDate } from '@/lib/domain/instants';
import type { ScopeLine } from '@/lib/domain/scope';
import type { AttachmentRole, PartName, ServiceBody } from '@/lib/evidence/format';
import { attachmentsOf, type OpenedEntry } from '@/lib/services/open-stored-log';

/** Tests for what a person may want to keep closed and may have written into a text all the same. */
export interface SpelledOut {
  isNaming: (value: unknown) => boolean;
  isIdentifying: (value: unknown) => boolean;
}

/** Pictures of these show prices, names or numbers as a rule; those of the work do not. */
const papers: ReadonlySet<AttachmentRole> = new Set([
  'receipt-front', 'receipt-back', 'receipt-page', 'work-order', 'lab-report', 'document',
]); // prettier-ignore

/** What the rules of a scope need to know of a line that is opened whole. */
export function scopeLine(entry: OpenedEntry, { isNaming, isIdentifying }: SpelledOut): ScopeLine {
  const { leaf, kind, values } = entry;
  const partsThat = (test: (value: unknown) => boolean): PartName[] =>
    [...values].filter(([, value]) => test(value)).map(([part]) => part);
  return {
    seq: leaf.seq,
    kind,
    refersTo: leaf.refersTo?.seq ?? null,
    items: kind === 'service' ? itemsOf(values.get('body') as ServiceBody | undefined) : [],
    finishedOn: dayOf(values.get('body')),
    parts: leaf.parts.map(({ name }) => name),
    naming: partsThat(isNaming),
    identifying: partsThat(isIdentifying),
    hasPapers: attachmentsOf(entry).some(({ role, mediaType }) => papers.has(role) || mediaType === 'application/pdf'),
    // A struck one may have been struck because it covers too little.
    isBlackedOut: entry.struckBy === null && isBlackedOutThroughout(attachmentsOf(entry)),
  };
}

/** The schedule items a service did. */
function itemsOf(body: ServiceBody | undefined): string[] {
  const items = (body?.tasks ?? []).flatMap(({ scheduleItem, scheduleItems }) => [
    ...(scheduleItem === undefined ? [] : [scheduleItem]),
    ...(scheduleItems ?? []),
  ]);
  return [...new Set(items)];
}

/** `finishedAt` of a service, `on` of a reading or a handover. */
function dayOf(body: unknown): string | null {
  const { finishedAt, on } = (body ?? {}) as { finishedAt?: { date?: unknown }; on?: unknown };
  const nested = typeof on === 'object' && on !== null ? (on as { date?: unknown }).date : on;
  const day = finishedAt?.date ?? nested;
  return typeof day === 'string' && isLocalDate(day) ? day : null;
}
