import 'server-only';
import { z } from 'zod';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';
import { addMonths } from '@/lib/domain/instants';
import { usualScope, type Scope } from '@/lib/domain/scope';
import { isAcceptableText, normaliseText } from '@/lib/evidence/text';
import { now } from '@/lib/ports/clock';
import { createViewingLink } from '@/lib/services/create-viewing-link';
import { scopeFields } from '@/lib/services/scope-input';

export const lastsChoices = ['30-days', '90-days', '1-year', 'until-revoked'] as const;

export const viewingLinkInput = z.object({
  label: z
    .string({ error: 'Say for whom the link is.' })
    .trim()
    .min(1, 'Say for whom the link is; only you see this.')
    .max(80, 'Keep the label under 80 characters.')
    .transform(normaliseText)
    .refine(isAcceptableText, 'Leave out control and direction characters.'),
  lasts: z.enum(lastsChoices, 'Choose how long the link lasts.'),
  ...scopeFields,
});

const millisecondsInDay = 24 * 60 * 60 * 1000;

/** Makes a viewing link for a machine's owner. The address is given out here, once. */
export async function shareViewingLink(options: {
  person: PersonRow;
  machineId: string;
  input: Pick<z.infer<typeof viewingLinkInput>, 'label' | 'lasts'>;
  /** What it opens; left out: everything but prices. */
  scope?: Scope;
}): Promise<{ id: string; url: string }> {
  const { person, machineId, input, scope = usualScope } = options;
  await authorise({ person, action: 'share', machine: machineId });
  const expiresAt = endOf(input.lasts, now());
  const { id, url } = await createViewingLink({ machineId, by: person.id, label: input.label, expiresAt, scope });
  return { id, url };
}

function endOf(lasts: (typeof lastsChoices)[number], from: Date): string | null {
  const after = (days: number) => new Date(from.getTime() + days * millisecondsInDay).toISOString();
  if (lasts === '30-days') return after(30);
  if (lasts === '90-days') return after(90);
  if (lasts === 'until-revoked') return null;
  const instant = from.toISOString();
  return addMonths(instant.slice(0, 10), 12) + instant.slice(10);
}
