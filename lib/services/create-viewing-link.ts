import 'server-only';
import { randomUUID } from 'node:crypto';
import { write } from '@/db/index';
import { insertViewingLink } from '@/db/queries/viewing-links';
import { newSecretAddress } from '@/lib/auth/secret-address';
import { env } from '@/lib/env';
import { paths } from '@/lib/paths';
import { now } from '@/lib/ports/clock';

export interface NewViewingLink {
  machineId: string;
  /** Person id. */
  by: string;
  /** What the owner calls it: for whom it is. */
  label: string;
  /** UTC instant; null: until revoked. */
  expiresAt: string | null;
  /** The packet that carries it, if one does. */
  packetId?: string;
}

/**
 * Mints a read-only link to a machine's record. The token is given out once, here; only its SHA-256 is kept. Who may
 * share is decided before this is called.
 */
export async function createViewingLink(options: NewViewingLink): Promise<{ id: string; token: string; url: string }> {
  const { machineId, by, label, expiresAt, packetId = null } = options;
  const { token, tokenHash } = newSecretAddress();
  const id = randomUUID();
  await write((transaction) =>
    insertViewingLink(
      {
        id,
        machineId,
        label,
        tokenHash,
        createdBy: by,
        createdAt: now().toISOString(),
        expiresAt,
        revokedAt: null,
        lastOpenedAt: null,
        timesOpened: 0,
        packetId,
        scope: null,
      },
      transaction,
    ),
  );
  return { id, token, url: `${env.url}${paths.viewingLink(token)}` };
}
