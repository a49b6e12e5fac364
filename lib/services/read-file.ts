import 'server-only';
import { findFile, uploadVisibleFrom } from '@/db/queries/uploads';
import { notFound } from '@/lib/errors';
import { blobStore } from '@/lib/ports/blob-store';
import { piecesOf, pullStream } from '@/lib/services/pull-stream';

export type FileKind = 'thumb' | 'plate' | 'copy' | 'original';

export interface OpenFile {
  body: ReadableStream;
  headers: Record<string, string>;
}

/**
 * One stored file of a machine or shelf, ready to be sent. `sha256` may be the original's or its copy's. Pictures made
 * here are shown in place; what a person sent is only ever handed over as an attachment, never rendered by us.
 * Throws `not-found` if the file does not belong to that subject.
 */
export async function readFileOf(options: { subject: string; sha256: string; kind: FileKind }): Promise<OpenFile> {
  const upload = /^[0-9a-f]{64}$/.test(options.sha256)
    ? await uploadVisibleFrom(options.sha256, options.subject)
    : null;
  if (upload === null) throw notFound('file');
  const wanted = {
    thumb: upload.thumbSha256,
    plate: upload.copySha256,
    copy: upload.copySha256,
    original: upload.sha256,
  }[options.kind];
  if (wanted === null) throw notFound('picture');
  return openStored(wanted, options.kind, upload.name);
}

async function openStored(sha256: string, kind: FileKind, name: string): Promise<OpenFile> {
  const file = await findFile(sha256);
  if (file === null || !(await blobStore.has(sha256))) throw notFound('file');
  const isShown = kind === 'thumb' || kind === 'plate';
  const shownName = kind === 'original' ? name : `${sha256.slice(0, 16)}.jpg`;
  return {
    body: pullStream(piecesOf(blobStore.open(sha256))),
    headers: {
      'Content-Type': file.mediaType,
      'Content-Length': String(file.bytes),
      'Content-Disposition': isShown ? 'inline' : `attachment; filename*=UTF-8''${encodeURIComponent(shownName)}`,
      'Content-Security-Policy': "sandbox; default-src 'none'",
      'X-Content-Type-Options': 'nosniff',
      // Named by its hash it can never change, but it stays with this one browser.
      'Cache-Control': 'private, max-age=31536000, immutable',
      'Cross-Origin-Resource-Policy': 'same-origin',
    },
  };
}
