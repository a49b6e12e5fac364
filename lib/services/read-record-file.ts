import 'server-only';
import { lastCheckpoint } from '@/db/queries/logs';
import { usualScope, type Scope } from '@/lib/domain/scope';
import { storeScope } from '@/lib/domain/stored-scope';
import { notFound } from '@/lib/errors';
import type { Attachment } from '@/lib/evidence/format';
import { readFileOf, type OpenFile } from '@/lib/services/read-file';
import { readRecord } from '@/lib/services/read-record';

export interface RecordFileRequest {
  machineId: string;
  /** Hex, of an attachment or of its shared copy. */
  sha256: string;
  kind: 'thumb' | 'plate' | 'copy';
  /** Only files of this entry and of the purchases it drew from. */
  seq?: number;
  /** What the reader's link opens; left out: everything but prices. */
  scope?: Scope;
}

/**
 * A file that an opened part of the record names; anything else of the machine, such as a picture on an unfinished
 * worksheet, is not found. Pictures come as their shared copy; a PDF has none and is handed over as an attachment.
 */
export async function readRecordFile(request: RecordFileRequest): Promise<OpenFile> {
  const { machineId, sha256, kind, seq, scope = usualScope } = request;
  const shown = (await filesShown(machineId, scope)).get(sha256);
  if (shown === undefined || (seq !== undefined && !shown.seqs.has(seq))) throw notFound('file');
  const isPdf = shown.mediaType === 'application/pdf';
  const file = await readFileOf({ subject: machineId, sha256, kind: isPdf ? 'original' : kind });
  return {
    body: file.body,
    headers: {
      ...file.headers,
      // The name a person gave a file on their device is nobody's business; and an ended link must end for pictures too.
      ...(isPdf ? { 'Content-Disposition': `attachment; filename="${sha256.slice(0, 16)}.pdf"` } : {}),
      'Cache-Control': 'private, no-store',
    },
  };
}

interface ShownFile {
  mediaType: string;
  seqs: Set<number>;
}
interface Remembered {
  /** Of the machine's log and of those of its shelves: whatever is sealed on one may show another file. */
  sizes: Map<string, number>;
  readAtMs: number;
  files: Map<string, ShownFile>;
}

/** One page asks for many thumbs at once; the record is not read anew for each of them. */
const remembered = new Map<string, Remembered>();
const mostRemembered = 20;
const longestMemoryMs = 30_000;

async function filesShown(machineId: string, scope: Scope): Promise<Map<string, ShownFile>> {
  const key = `${machineId} ${storeScope(scope) ?? 'usual'}`;
  const known = remembered.get(key);
  if (known !== undefined && performance.now() - known.readAtMs < longestMemoryMs && (await isNewest(known))) {
    return known.files;
  }

  const record = await readRecord({ machineId, scope });
  const files = new Map<string, ShownFile>();
  const take = (attachments: Attachment[], seqs: number[]) => {
    for (const { sha256, mediaType, copy } of attachments) {
      for (const hash of copy === undefined ? [sha256] : [sha256, copy.sha256]) {
        const seen = files.get(hash)?.seqs ?? [];
        files.set(hash, { mediaType, seqs: new Set([...seen, ...seqs]) });
      }
    }
  };
  for (const { attachments, seq } of record.entries) take(attachments, [seq]);
  for (const one of record.shelves.flatMap(({ purchases }) => purchases)) {
    take([...one.attachments, ...one.corrections.flatMap(({ attachments }) => attachments)], one.usedBy);
  }

  const sizes = new Map([record.log, ...record.shelves.map(({ log }) => log)].map(({ id, size }) => [id, size]));
  if (remembered.size >= mostRemembered) remembered.clear();
  remembered.set(key, { sizes, readAtMs: performance.now(), files });
  return files;
}

async function isNewest({ sizes }: Remembered): Promise<boolean> {
  for (const [log, size] of sizes) if ((await lastCheckpoint(log))?.size !== size) return false;
  return true;
}
