import { isJsonObject } from '@/lib/evidence/canonical';
import { openDisclosure } from '@/lib/evidence/disclosure';
import { type Findings, reasonOf } from '@/lib/evidence/findings';
import type { Attachment, BundleEntry, PartName } from '@/lib/evidence/format';
import { isCount, isHexHash } from '@/lib/evidence/formats';
import type { WalkedLine } from '@/lib/evidence/verify-log';

/** The parts of one entry: what may be shown, and what is closed. */
export interface EntryParts {
  opened: Map<PartName, unknown>;
  withheld: PartName[];
}

/**
 * Checks the opened parts of an entry against the digests in its line: the right part, in its form, once.
 *
 * @example openParts(entry, line, log.id, findings).withheld; // ['prices']
 */
export function openParts(entry: BundleEntry, line: WalkedLine, log: string, findings: Findings): EntryParts {
  const opened = new Map<PartName, unknown>();
  // A line that cannot be read names no digests; it is an alteration already, and nothing of it is shown.
  if (line.leaf === null) return { opened, withheld: [] };
  const sealed = new Map(line.leaf.parts.map((part) => [part.name, part.digest]));
  for (const text of entry.parts) {
    const place = { log, seq: line.seq };
    try {
      const part = openDisclosure(text);
      const at = { ...place, part: part.name };
      if (sealed.get(part.name) !== part.digest) {
        const sentence = `The part “${part.name}” of entry ${line.seq} is not the one that was sealed.`;
        findings.alter(
          'part-mismatch',
          at,
          sentence,
          `digest ${part.digest}, sealed ${sealed.get(part.name) ?? 'none'}`,
        );
      } else if (opened.has(part.name)) {
        findings.alter(
          'part-mismatch',
          at,
          `The part “${part.name}” of entry ${line.seq} stands there twice.`,
          'opened twice',
        );
      } else if (!hasForm(part.name, part.value)) {
        const sentence = `The part “${part.name}” of entry ${line.seq} is not of the form that such a part has.`;
        findings.alter('part-mismatch', at, sentence, 'value is not of its form');
      } else {
        opened.set(part.name, part.value);
      }
    } catch (error) {
      findings.alter('part-mismatch', place, `A part of entry ${line.seq} cannot be read.`, reasonOf(error));
    }
  }
  const withheld = [...sealed.keys()].filter((name) => !opened.has(name));
  return { opened, withheld };
}

/**
 * Whether a value is a list of attachments, as far as files are checked against it.
 *
 * @example isAttachments([{ sha256: '', bytes: 1, mediaType: 'image/jpeg' }]); // false
 */
export function isAttachments(value: unknown): value is Attachment[] {
  return (
    Array.isArray(value) &&
    value.every((item) => isFileNote(item) && (item.copy === undefined || isFileNote(item.copy)))
  );
}

function isFileNote(value: unknown): value is Record<string, unknown> {
  return isJsonObject(value) && isHexHash(value.sha256) && isCount(value.bytes) && typeof value.mediaType === 'string';
}

function hasForm(name: PartName, value: unknown): boolean {
  return name === 'attachments' ? isAttachments(value) : isJsonObject(value);
}
