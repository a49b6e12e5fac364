import { fromBase64Url } from '@/lib/evidence/bytes';
import { isJsonObject } from '@/lib/evidence/canonical';
import type { DeviceSignature } from '@/lib/evidence/finding';
import { type Findings, reasonOf } from '@/lib/evidence/findings';
import type { EntryKind, Reference } from '@/lib/evidence/format';
import { sha256Hex } from '@/lib/evidence/hash';
import { checkStatementSignature, isKeyBody, statementChallenge } from '@/lib/evidence/statement';
import type { OpenedLog } from '@/lib/evidence/verify-references';

/** A line of a log, as far as signatures are checked by it. */
export interface StatementLine {
  seq: number;
  leafHash: string;
  kind: EntryKind | null;
  refersTo: Reference | null;
  /** Undefined if it is not opened. */
  body: unknown;
  /** The author part; undefined if it is not opened. */
  author: unknown;
}

/** What was found about a statement's signature. Without its key's body, whose key it is cannot be said. */
export type StatementFinding =
  | { result: 'holds'; signature: DeviceSignature }
  | { result: 'fails'; reason: string }
  | { result: 'not-checked'; site: string };

/**
 * Checks every signature made outside the server that the opened bodies of a log carry: over the statement at its
 * place, and with a key that an earlier `key` entry of the same log names, which no strike had withdrawn by then.
 *
 * @returns by the seq of the entry that carries the signature
 * @example judgeStatements(log.id, lines).get(7)?.result; // 'holds'
 */
export function judgeStatements(log: string, lines: readonly StatementLine[]): Map<number, StatementFinding> {
  const found = new Map<number, StatementFinding>();
  const keys = lines.filter(({ kind }) => kind === 'key');
  const strikes = strikesByTarget(lines);
  for (const line of lines) {
    const signature = signatureOf(line);
    if (signature === undefined) continue;
    const standing = keys.filter(({ seq }) => seq < line.seq && !isStruck(seq, line.seq, strikes));
    found.set(line.seq, judge(log, line, signature, standing));
  }
  return found;
}

/**
 * The same over the logs of a bundle: one that fails is an alteration, one whose key is closed is named as not checked.
 *
 * @returns those that hold, by `<log>/<seq>`
 * @example checkStatements(logs, findings).get(`${log}/7`)?.site; // 'https://records.garage.example'
 */
export function checkStatements(logs: OpenedLog[], findings: Findings): Map<string, DeviceSignature> {
  const holding = new Map<string, DeviceSignature>();
  for (const log of logs) {
    for (const [seq, found] of judgeStatements(log.source.id, linesOf(log))) {
      if (found.result === 'holds') holding.set(`${log.source.id}/${seq}`, found.signature);
      else if (found.result === 'fails') {
        const sentence = `The signature in entry ${seq}, which says that it was made on the signer’s own device, does not hold.`;
        findings.alter(
          'statement-signature-invalid',
          { log: log.source.id, seq, part: 'body' },
          sentence,
          found.reason,
        );
      } else {
        findings.notChecked.push(
          `Whose key signed entry ${seq}: the signature holds, but the entry that names the key is withheld.`,
        );
      }
    }
  }
  return holding;
}

function linesOf(log: OpenedLog): StatementLine[] {
  return log.lines.map(({ seq, hash, leaf }) => {
    const opened = log.parts[seq]?.opened;
    const { kind = null, refersTo = null } = leaf ?? {};
    return { seq, leafHash: hash, kind, refersTo, body: opened?.get('body'), author: opened?.get('author') };
  });
}

/** Undefined where none is carried, or where nothing of it is opened. */
function signatureOf({ kind, body }: StatementLine): unknown {
  if (kind === 'signature') return body;
  return kind === 'countersignature' && isJsonObject(body) ? body.signature : undefined;
}

/** `keys` are the key entries that stood when the statement was sealed. */
function judge(log: string, line: StatementLine, carried: unknown, keys: readonly StatementLine[]): StatementFinding {
  const { refersTo, kind, seq } = line;
  try {
    const body = kind === 'countersignature' && isJsonObject(line.body) ? line.body : {};
    const { site, publicKey } = checkStatementSignature(carried, statementChallenge({ log, refersTo, body }));
    if (refersTo === null) return { result: 'fails', reason: 'it names no entry that it signs' };
    // Over no words, it would be what a `signature` entry carries, taken from there and called a countersignature.
    const isBare = kind === 'countersignature' && Object.keys(body).every((name) => name === 'signature');
    if (isBare) return { result: 'fails', reason: 'the countersignature says nothing that was signed' };
    // The newest: a key may have been named again after a strike.
    const key = keys.findLast((one) => isKeyBody(one.body) && one.body.publicKey === publicKey);
    if (key === undefined || !isKeyBody(key.body)) {
      if (keys.some((one) => one.body === undefined)) return { result: 'not-checked', site };
      return { result: 'fails', reason: 'no earlier key entry of this log that stands names its key' };
    }
    const { person } = key.body;
    if (isJsonObject(line.author) && line.author.person !== person)
      return { result: 'fails', reason: `its key is that of ${person}, and its author is somebody else` };
    const keyFingerprint = sha256Hex(fromBase64Url(publicKey));
    const signs = kind === 'signature' ? refersTo.seq : seq;
    return { result: 'holds', signature: { keyFingerprint, keySeq: key.seq, person, site, signs } };
  } catch (error) {
    return { result: 'fails', reason: reasonOf(error) };
  }
}

function strikesByTarget(lines: readonly StatementLine[]): Map<number, number[]> {
  const strikes = new Map<number, number[]>();
  for (const { kind, seq, refersTo } of lines) {
    if (kind !== 'strike' || refersTo === null || refersTo.seq >= seq) continue;
    const others = strikes.get(refersTo.seq);
    if (others === undefined) strikes.set(refersTo.seq, [seq]);
    else others.push(seq);
  }
  return strikes;
}

/** Whether a strike that itself stood had withdrawn an entry before `until`. */
function isStruck(seq: number, until: number, strikes: Map<number, number[]>): boolean {
  return (strikes.get(seq) ?? []).some((strike) => strike < until && !isStruck(strike, until, strikes));
}
