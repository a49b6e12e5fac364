import 'server-only';
import { write } from '@/db/index';
import {
  findViewingLink,
  findViewingLinkByTokenHash,
  updateViewingLink,
  type ViewingLinkRow,
} from '@/db/queries/viewing-links';
import { hashSecretAddress, isSecretAddress } from '@/lib/auth/secret-address';
import { WitnessmarkError, notFound } from '@/lib/errors';
import { now } from '@/lib/ports/clock';

/** Finds the viewing link behind a secret address and notes the visit. Throws `not-found` or `gone`. */
export async function openViewingLink(token: string): Promise<ViewingLinkRow> {
  const found = isSecretAddress(token) ? await findViewingLinkByTokenHash(hashSecretAddress(token)) : null;
  if (found === null) throw notFound('viewing link');
  refuseEndedLink(found);
  const lastOpenedAt = now().toISOString();
  await write((transaction) =>
    updateViewingLink(found.id, { lastOpenedAt, timesOpened: found.timesOpened + 1 }, transaction),
  );
  return found;
}

/** The link a reader came by; revoked or run out, it is gone at the very next request. */
export async function readViewingLink(options: { id: string; cameByAddress: boolean }): Promise<ViewingLinkRow> {
  const found = options.cameByAddress ? await findViewingLink(options.id) : null;
  if (found === null) throw notFound('viewing link');
  refuseEndedLink(found);
  return found;
}

function refuseEndedLink(link: ViewingLinkRow): void {
  if (link.revokedAt !== null) {
    throw new WitnessmarkError('gone', 'The owner has revoked this viewing link. Ask them for a new one.');
  }
  if (link.expiresAt !== null && link.expiresAt <= now().toISOString()) {
    throw new WitnessmarkError('gone', 'This viewing link has run out. Ask the owner for a new one.');
  }
}
