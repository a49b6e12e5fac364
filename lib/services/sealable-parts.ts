import 'server-only';
import { randomBytes } from 'node:crypto';
import { invalidInput } from '@/lib/errors';
import { newSalt } from '@/lib/evidence/disclosure';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import type { PartName } from '@/lib/evidence/format';
import { normaliseText } from '@/lib/evidence/text';

export type Parts = Partial<Record<PartName, unknown>>;

const saltBytes = 16;

/**
 * Parts as a leaf takes them: every text in its one normal form, members without a value left out, a fresh salt each.
 * Throws invalid-input naming the text by its path (`body.tasks.0.title`) if it holds a character that cannot be sealed.
 */
export function sealableParts(parts: Parts): { name: PartName; value: unknown; salt: string }[] {
  return (Object.entries(parts) as [PartName, unknown][])
    .filter(([, value]) => value !== undefined)
    .map(([name, value]) => ({ name, value: normalised(value, name), salt: newSalt(randomBytes(saltBytes)) }));
}

function normalised(value: unknown, at: string): unknown {
  if (typeof value === 'string') return normalisedText(value, at);
  if (Array.isArray(value)) return value.map((item, index) => normalised(item, `${at}.${index}`));
  if (typeof value !== 'object' || value === null) return value;
  return Object.fromEntries(
    Object.entries(value)
      .filter(([, member]) => member !== undefined)
      .map(([name, member]) => [normalisedText(name, at), normalised(member, `${at}.${name}`)]),
  );
}

function normalisedText(text: string, at: string): string {
  try {
    return normaliseText(text);
  } catch (error) {
    if (error instanceof EvidenceError) throw invalidInput({ [at]: error.message }, error.message);
    throw error;
  }
}
