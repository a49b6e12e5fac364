import { bundleStatement, demandBundle, maxBundleCharacters } from '@/lib/evidence/bundle';
import { canonicalJson, isJsonObject, parseJson } from '@/lib/evidence/canonical';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import type { Comparison, DeviceSignature, Finding } from '@/lib/evidence/finding';
import { Findings, reasonOf } from '@/lib/evidence/findings';
import type { Bundle } from '@/lib/evidence/format';
import { checkNote, chooseKey, type KeyRing } from '@/lib/evidence/key-ring';
import type { PageSignature } from '@/lib/evidence/pdf-signature';
import { compareWith } from '@/lib/evidence/verify-against';
import { remarkOnStamps } from '@/lib/evidence/remark-on-stamps';
import { StampTrust } from '@/lib/evidence/stamp-trust';
import { describeEntries, describeLogs, remarkOnWithheld } from '@/lib/evidence/verify-entries';
import { checkFiles, type GivenFile } from '@/lib/evidence/verify-files';
import { walkLog } from '@/lib/evidence/verify-log';
import { checkPages } from '@/lib/evidence/verify-pages';
import { openParts } from '@/lib/evidence/verify-parts';
import { checkReferences, type OpenedLog } from '@/lib/evidence/verify-references';
import { checkStatements } from '@/lib/evidence/verify-statements';

/** What is to be checked, and what with. */
export interface VerifyRequest {
  /** The text of `record.json`. */
  bundleText: string;
  /** The files found beside it; undefined if only the record was given. */
  files?: GivenFile[];
  /** A verifier key the reader has from elsewhere. Without it the first key in the file is used, and remarked on. */
  key?: string;
  /** An older `record.json` of the same record, or a signed checkpoint. */
  against?: string;
  /**
   * Root certificates (DER) of time-stamp authorities that the reader trusts, from wherever the reader got them. Only
   * what a chain to one of these vouches for is proven; no root is ever taken from the file.
   */
  roots?: readonly Uint8Array[];
  /** When this is checked, as an instant: a time stamp from later is invalid. Absent: not asked. */
  at?: string;
  /** What the signature over the pages amounts to, if the record came out of a packet. */
  pages?: PageSignature;
}

/**
 * Checks a record: every line, link, seal, signature, opened part, reference and file of it. Never throws, whatever
 * it is given.
 *
 * @returns what was found; `unreadable` only if there is no bundle to read
 * @example verifyBundle({ bundleText, key: 'records.garage.example+1f2e3d4c+AXk…' }).outcome; // 'unchanged'
 */
export function verifyBundle(request: VerifyRequest): Finding {
  try {
    return verify(request);
  } catch (error) {
    // Fails closed: what cannot be checked to its end is not called unchanged.
    const findings = new Findings();
    findings.alter('bundle-changed', {}, 'This record could not be checked to its end.', reasonOf(error));
    return report(findings, { outcome: 'altered' });
  }
}

function verify(request: VerifyRequest): Finding {
  const findings = new Findings();
  let value: unknown;
  try {
    value = readBundleValue(request.bundleText);
  } catch (error) {
    return unreadable(reasonOf(error));
  }
  if (!isCanonical(value, request.bundleText)) {
    const sentence = 'This file was written down again in another spelling than the one that was signed.';
    findings.alter('not-canonical', {}, sentence, 'the text is not its own RFC 8785 form');
  }
  try {
    demandBundle(value);
  } catch (error) {
    if (error instanceof EvidenceError && error.code === 'too-large') return unreadable(reasonOf(error));
    findings.alter('bundle-changed', {}, 'This file is not of the form that a record has.', reasonOf(error));
    return report(findings, { outcome: 'altered' });
  }
  return verifyReadable(value, request, findings);
}

function verifyReadable(bundle: Bundle, request: VerifyRequest, findings: Findings): Finding {
  const ring = chooseKey(bundle.verifierKeys, request.key, findings);
  const isSigned = checkBundleSignature(bundle, ring, findings);
  const trust = new StampTrust(request.roots);
  const check = { trust, at: request.at === undefined ? undefined : Date.parse(request.at) };
  const logs: OpenedLog[] = bundle.logs.map((source) => {
    const walked = walkLog(source, ring, findings, check);
    const parts = source.entries.map((entry, seq) => {
      const line = walked.lines[seq];
      return line === undefined ? { opened: new Map(), withheld: [] } : openParts(entry, line, source.id, findings);
    });
    return { ...walked, parts };
  });
  checkReferences(logs, findings);
  const statements = checkStatements(logs, findings);
  checkFiles(bundle.files, logs, request.files, findings);
  const against =
    request.against === undefined ? null : compareWith(request.against, logs, bundle.madeAt, ring, findings);
  remarkOnStamps(logs, trust, findings);
  remarkOnWithheld(logs, findings);
  const pages = checkPages(bundle.packetCertificate, request.pages, isSigned, findings);
  return report(findings, {
    outcome: findings.alterations.length > 0 ? 'altered' : 'unchanged',
    bundle,
    ring,
    logs,
    statements,
    against,
    pages,
  });
}

function readBundleValue(text: string): Record<string, unknown> {
  if (text.length > maxBundleCharacters)
    throw new EvidenceError('too-large', 'This record is larger than any real one.');
  const value = parseJson(text);
  if (!isJsonObject(value) || value.format !== 'witnessmark/bundle/1') {
    throw new EvidenceError('unreadable', 'This is JSON, but no record of format witnessmark/bundle/1.');
  }
  return value;
}

function isCanonical(value: unknown, text: string): boolean {
  try {
    return canonicalJson(value) === text;
  } catch {
    return false;
  }
}

/** Whether the file as a whole is what the chosen key signed; names what is wrong if not. */
function checkBundleSignature(bundle: Bundle, ring: KeyRing, findings: Findings): boolean {
  const before = findings.alterations.length;
  const note = checkNote(bundle.signature, ring, 'chosen', {}, 'the file as a whole', findings);
  const statement = bundleStatement(bundle);
  if (note !== null && note.text !== statement) {
    const sentence = 'Something in this file was changed, added or taken out after the file was signed.';
    findings.alter(
      'bundle-changed',
      {},
      sentence,
      `signed ${JSON.stringify(note.text)}, found ${JSON.stringify(statement)}`,
    );
  }
  return ring.chosen !== null && findings.alterations.length === before;
}

function unreadable(reason: string): Finding {
  const findings = new Findings();
  return { ...report(findings, { outcome: 'unreadable' }), sentence: `This is no record that can be read. ${reason}` };
}

interface Seen {
  outcome: Finding['outcome'];
  bundle?: Bundle;
  ring?: KeyRing;
  logs?: OpenedLog[];
  statements?: Map<string, DeviceSignature>;
  against?: Comparison | null;
  pages?: Finding['pages'];
}

function report(
  findings: Findings,
  { outcome, bundle, ring, logs = [], statements, against = null, pages = 'none' }: Seen,
): Finding {
  const entries = describeEntries(logs, findings, statements);
  const entriesOpened = entries.filter((entry) => entry.openedParts.some((part) => part.name === 'body')).length;
  const sentences = {
    unchanged: 'Unchanged: every line, seal and opened part is what was sealed.',
    altered: `Altered: ${findings.alterations.length} ${findings.alterations.length === 1 ? 'thing is' : 'things are'} not as sealed.`,
    unreadable: 'This is no record that can be read.',
  };
  return {
    outcome,
    sentence: sentences[outcome],
    alterations: findings.alterations,
    remarks: findings.remarks,
    entries,
    logs: describeLogs(logs),
    counts: {
      entries: entries.length,
      entriesOpened,
      partsOpened: entries.reduce((total, entry) => total + entry.openedParts.length, 0),
      partsWithheld: entries.reduce((total, entry) => total + entry.withheldParts.length, 0),
    },
    key: ring?.described ?? null,
    bundle: bundle === undefined ? null : { madeAt: bundle.madeAt, purpose: bundle.purpose, number: bundle.number },
    against,
    pages,
    notChecked: findings.notChecked,
  };
}
