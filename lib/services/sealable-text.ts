import 'server-only';
import { z } from 'zod';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import { normaliseText } from '@/lib/evidence/text';

/** A text field of a form as it is sealed: in its one normal form, without space around it, refused by sentence. */
export function sealableText({ empty, most }: { empty: string; most: number }) {
  return z
    .string({ error: empty })
    .transform((text, context) => {
      try {
        return normaliseText(text).trim();
      } catch (error) {
        if (!(error instanceof EvidenceError)) throw error;
        context.addIssue({ code: 'custom', message: error.message });
        return z.NEVER;
      }
    })
    .pipe(
      z
        .string()
        .min(1, empty)
        .max(most, `Keep it under ${most.toLocaleString('en')} characters.`),
    );
}
