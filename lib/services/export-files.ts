import 'server-only';
import { openDisclosure } from '@/lib/evidence/disclosure';
import type { Attachment, Bundle } from '@/lib/evidence/format';

/** What goes into an export beside the record: the pictures and papers as they came, or only their shared copies. */
export type ExportFiles = 'originals' | 'copies';

const extensions: Partial<Record<string, string>> = {
  'image/jpeg': 'jpg',
  'image/png': 'png',
  'image/webp': 'webp',
  'image/heic': 'heic',
  'application/pdf': 'pdf',
};

/**
 * The names that files have inside an export, by their SHA-256: the folder, the entry's number, the file's own, what it
 * is, and the start of its hash. Receipts carry the number of their line on the shelf's log. A file that several
 * entries hold is there once, under the first.
 */
export function nameExportFiles(bundle: Bundle, which: ExportFiles): Map<string, string> {
  const names = new Map<string, string>();
  const taken = new Set<string>();
  const take = (folder: string, prefix: string, { sha256, mediaType }: Pick<Attachment, 'sha256' | 'mediaType'>) => {
    if (names.has(sha256)) return;
    const ending = extensions[mediaType] ?? 'bin';
    const short = `${folder}/${prefix}-${sha256.slice(0, 8)}.${ending}`;
    const name = taken.has(short) ? `${folder}/${prefix}-${sha256}.${ending}` : short;
    taken.add(name);
    names.set(sha256, name);
  };
  bundle.logs.forEach((log, index) => {
    // Numbers of two shelves would be the same: the second shelf says which it is.
    const whose = log.subject === 'machine' ? '' : index === 1 ? 'receipt-' : `shelf${index}-receipt-`;
    log.entries.forEach(({ parts }, seq) => {
      const opened = parts.map((text) => openDisclosure(text)).find(({ name }) => name === 'attachments');
      ((opened?.value ?? []) as Attachment[]).forEach((attachment, place) => {
        const prefix = `${whose}${seq}-${place + 1}-${attachment.role}`;
        // A paper has no copy; without originals it would be missing altogether.
        if (which === 'originals' || attachment.copy === undefined) take('originals', prefix, attachment);
        if (attachment.copy !== undefined) take('copies', prefix, attachment.copy);
      });
    });
  });
  return names;
}
