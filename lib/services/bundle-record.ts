import 'server-only';
import type { StoredLog } from '@/db/queries/entries';
import { blackedOutFrom } from '@/lib/domain/blacked-out';
import { usualScope, type Scope } from '@/lib/domain/scope';
import { bundleText, signBundle } from '@/lib/evidence/bundle';
import {
  isNoteOf,
  type NoteSigner,
  parseNote,
  parseVerifierKey,
  signNote,
  verifierKey,
} from '@/lib/evidence/checkpoint';
import type { Bundle, BundleFile, BundleLog, PartName } from '@/lib/evidence/format';
import { now } from '@/lib/ports/clock';
import { signingKey } from '@/lib/ports/signing-key';
import { publishedKeys, signerNamed } from '@/lib/services/log-keys';
import { openInScope, type ScopedLog } from '@/lib/services/open-in-scope';
import { attachmentsOf, type OpenedEntry } from '@/lib/services/open-stored-log';

export interface BundleOptions {
  machineId: string;
  purpose: string;
  number: string;
  /** What it opens; left out: everything but prices. */
  scope?: Scope;
  /** Files that go with the bundle: SHA-256 of an attachment or of its copy → the name it has beside the bundle. */
  included?: Map<string, string>;
  /** SHA-256 (hex) of the certificate that signs the packet around it. */
  packetCertificate?: string | null;
}

/**
 * The record as others check it: every leaf of the machine's log and of the shelf logs that its opened entries draw
 * from, and of their parts those that the scope opens; of the shelves only the purchases drawn.
 */
export async function bundleRecord(options: BundleOptions): Promise<{ text: string; bundle: Bundle }> {
  const { machineId, scope = usualScope } = options;
  const { machine, shelves } = await openInScope({ machineId, scope });
  const signer = signerNamed(machine.stored.log.keyName);
  const key = verifierKey(signer.name, signingKey().publicKey);
  const others = publishedKeys().map((published) => published.verifierKey);
  const unsigned: Omit<Bundle, 'signature'> = {
    format: 'witnessmark/bundle/1',
    madeAt: now().toISOString(),
    purpose: options.purpose,
    number: options.number,
    verifierKeys: [key, ...others.filter((other) => other !== key)],
    packetCertificate: options.packetCertificate ?? null,
    logs: [machine, ...shelves].map((log) => bundleLog(log, signer, key)),
    files: bundleFiles(
      [machine, ...shelves].flatMap(({ entries }) => entries),
      options.included ?? new Map<string, string>(),
    ),
  };
  const bundle = signBundle(unsigned, signer);
  return { text: bundleText(bundle), bundle };
}

function bundleLog({ stored, isOpen }: ScopedLog, signer: NoteSigner, key: string): BundleLog {
  const isShown = ({ name, seq }: StoredLog['parts'][number]) => isOpen(name as PartName, seq);
  const partsOf = grouped(stored.parts.filter(isShown), ({ seq }) => seq);
  const tokensOf = grouped(stored.tokens, ({ size }) => size);
  const last = stored.checkpoints.at(-1)?.note ?? '';
  return {
    id: stored.log.id,
    subject: stored.log.subject,
    origin: stored.log.origin,
    checkpoint: signedBy(last, signer, key),
    entries: stored.entries.map(({ seq, leaf }, index) => ({
      leaf,
      parts: (partsOf.get(seq) ?? []).map(({ disclosure }) => disclosure),
      seal: {
        checkpoint: stored.checkpoints[index]?.note ?? '',
        tokens: (tokensOf.get(seq + 1) ?? []).map(({ token }) => token),
      },
    })),
  };
}

function grouped<Row>(rows: Row[], keyOf: (row: Row) => number): Map<number, Row[]> {
  const groups = new Map<number, Row[]>();
  for (const row of rows) {
    const group = groups.get(keyOf(row));
    if (group === undefined) groups.set(keyOf(row), [row]);
    else group.push(row);
  }
  return groups;
}

/** A log that opened under another name, or was last sealed with an older key: its last checkpoint is signed anew. */
function signedBy(note: string, signer: NoteSigner, key: string): string {
  const parsed = parseNote(note);
  return isNoteOf(parsed, parseVerifierKey(key)) ? note : signNote(parsed.text, signer);
}

/**
 * Every attachment and shared copy that an opened part names, each once. A blacked-out picture says which copy it was
 * made from, if that is named here too: what stays closed is not pointed at.
 */
function bundleFiles(entries: OpenedEntry[], included: Map<string, string>): BundleFile[] {
  const files = new Map<string, BundleFile>();
  const add = ({ sha256, bytes, mediaType }: { sha256: string; bytes: number; mediaType: string }) => {
    if (files.has(sha256)) return;
    const name = included.get(sha256);
    files.set(sha256, {
      sha256,
      // A name nobody chose is made from the hash, so that no two files share one.
      name: name ?? `${sha256}${extensions[mediaType] ?? ''}`,
      mediaType,
      bytes,
      included: name !== undefined,
      derivedFrom: null,
    });
  };
  const attachments = entries.flatMap(attachmentsOf);
  for (const attachment of attachments) {
    add(attachment);
    if (attachment.copy !== undefined) add(attachment.copy);
  }
  for (const attachment of attachments) {
    const [from, file] = [blackedOutFrom(attachment), files.get(attachment.sha256)];
    if (from !== null && file !== undefined && files.has(from)) file.derivedFrom = from;
  }
  const stray = [...included.keys()].find((sha256) => !files.has(sha256));
  if (stray !== undefined) throw new Error(`The file ${stray} belongs to no opened entry, so it cannot be included.`);
  return [...files.values()];
}

const extensions: Partial<Record<string, string>> = {
  'image/jpeg': '.jpg',
  'image/png': '.png',
  'image/webp': '.webp',
  'image/heic': '.heic',
  'application/pdf': '.pdf',
};
