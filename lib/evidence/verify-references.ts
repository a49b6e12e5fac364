import { hasExactly, isJsonObject } from '@/lib/evidence/canonical';
import type { Findings } from '@/lib/evidence/findings';
import type { EntryKind } from '@/lib/evidence/format';
import { isCount, isHexHash } from '@/lib/evidence/formats';
import type { WalkedLine, WalkedLog } from '@/lib/evidence/verify-log';
import type { EntryParts } from '@/lib/evidence/verify-parts';

/** A log with the parts of each of its lines. */
export interface OpenedLog extends WalkedLog {
  parts: EntryParts[];
}

/** Kinds that say something about an earlier entry, and so must name it. */
const kindsThatRefer: ReadonlySet<EntryKind> = new Set(['strike', 'addendum', 'countersignature', 'signature']);

/**
 * Checks everything one entry says about another: `refersTo`, the terms a service was judged by, and the purchase
 * behind every draw, which must be in the bundle's shelf log.
 *
 * @example checkReferences(logs, findings);
 */
export function checkReferences(logs: OpenedLog[], findings: Findings): void {
  for (const log of logs) {
    for (const line of log.lines) {
      if (line.leaf === null) continue;
      checkRefersTo(log, line, line.leaf.kind, findings);
      const body = log.parts[line.seq]?.opened.get('body');
      if (body === undefined) continue;
      if (line.leaf.kind === 'service') checkTerms(log, line, body, findings);
      for (const draw of drawsIn(body)) checkDraw(draw, logs, log, line, findings);
      if (line.leaf.kind === 'opening' && isJsonObject(body) && body.continues !== undefined) {
        const sentence = 'This record continues another one, kept elsewhere, which is not part of this file.';
        findings.remark('other-log', sentence, { log: log.source.id, seq: line.seq });
      }
    }
  }
}

function checkRefersTo(log: OpenedLog, line: WalkedLine, kind: EntryKind, findings: Findings): void {
  const place = { log: log.source.id, seq: line.seq };
  const target = line.leaf?.refersTo ?? null;
  if (target === null) {
    if (!kindsThatRefer.has(kind)) return;
    const sentence = `Entry ${line.seq} is a ${kind} of an earlier entry, and names none.`;
    findings.alter('reference-broken', place, sentence, `refersTo is null in a ${kind}`);
  } else if (log.lines[target.seq]?.hash !== target.leafHash) {
    const sentence = `Entry ${line.seq} refers to entry ${target.seq}, but not to the one that stands there.`;
    findings.alter('reference-broken', place, sentence, `refersTo ${target.leafHash} at seq ${target.seq}`);
  }
}

function checkTerms(log: OpenedLog, line: WalkedLine, body: unknown, findings: Findings): void {
  const termsSeq = isJsonObject(body) ? body.termsSeq : undefined;
  const isEarlier = isCount(termsSeq) && termsSeq < line.seq;
  if (isEarlier && log.lines[termsSeq]?.leaf?.kind === 'terms') return;
  const sentence = `Entry ${line.seq} does not name the terms by which it was judged.`;
  const place = { log: log.source.id, seq: line.seq, part: 'body' };
  findings.alter('reference-broken', place, sentence, `termsSeq ${String(termsSeq)} is no earlier terms entry`);
}

/** Every `draws` list in a body, wherever it stands: under a fill, a part, a task or an addendum. */
function* drawsIn(value: unknown): Generator<unknown> {
  if (Array.isArray(value)) for (const item of value) yield* drawsIn(item);
  if (!isJsonObject(value)) return;
  for (const [name, item] of Object.entries(value)) {
    if (name === 'draws') yield* Array.isArray(item) ? item : [item];
    else yield* drawsIn(item);
  }
}

function checkDraw(draw: unknown, logs: OpenedLog[], log: OpenedLog, line: WalkedLine, findings: Findings): void {
  const reason = whyNoPurchase(draw, logs);
  if (reason === null) return;
  const sentence = `Entry ${line.seq} says that something was taken from a purchase, and that purchase is not in this file.`;
  findings.alter('reference-broken', { log: log.source.id, seq: line.seq, part: 'body' }, sentence, reason);
}

function whyNoPurchase(draw: unknown, logs: OpenedLog[]): string | null {
  const purchase = isJsonObject(draw) ? draw.purchase : undefined;
  if (!isJsonObject(draw) || !isCount(draw.line) || !isJsonObject(purchase))
    return 'the draw names no line of a purchase';
  const { seq, leafHash } = purchase;
  if (!hasExactly(purchase, ['log', 'seq', 'leafHash']) || !isCount(seq) || !isHexHash(leafHash))
    return 'the draw is malformed';
  const shelf = logs.find((candidate) => candidate.source.id === purchase.log && candidate.source.subject === 'shelf');
  if (shelf === undefined) return `no shelf log ${String(purchase.log)} in this file`;
  const bought = shelf.lines[seq];
  if (bought?.hash !== leafHash) return `entry ${seq} of the shelf log is not ${leafHash}`;
  if (bought.leaf?.kind !== 'purchase') return `entry ${seq} of the shelf log is no purchase`;
  const body = shelf.parts[seq]?.opened.get('body');
  if (body === undefined) return null;
  const lines = isJsonObject(body) && Array.isArray(body.lines) ? body.lines : [];
  const hasLine = lines.some((item) => isJsonObject(item) && item.line === draw.line);
  return hasLine ? null : `the purchase at entry ${seq} has no line ${draw.line}`;
}
