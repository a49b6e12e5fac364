import 'server-only';
import { write } from '@/db/index';
import { findViewingLink, updateViewingLink } from '@/db/queries/viewing-links';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';
import { notFound } from '@/lib/errors';
import { now } from '@/lib/ports/clock';

/** Ends a viewing link at once. Revoking twice changes nothing. */
export async function revokeViewingLink(options: { person: PersonRow; id: string }): Promise<{ machineId: string }> {
  const link = await findViewingLink(options.id);
  if (link === null) throw notFound('viewing link');
  await authorise({ person: options.person, action: 'share', machine: link.machineId });
  if (link.revokedAt === null) {
    const revokedAt = now().toISOString();
    await write((transaction) => updateViewingLink(link.id, { revokedAt }, transaction));
  }
  return { machineId: link.machineId };
}
