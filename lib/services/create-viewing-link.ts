import 'server-only';
import { randomUUID } from 'node:crypto';
import { write } from '@/db/index';
import { insertViewingLink } from '@/db/queries/viewing-links';
import { newSecretAddress } from '@/lib/auth/secret-address';
import { usualScope, type Scope } from '@/lib/domain/scope';
import { storeScope } from '@/lib/domain/stored-scope';
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
  /** What it opens; left out: everything but prices. */
  scope?: Scope;
}

/**
 * Mints a read-only link to a machine's record, or to a part of it. The token is given out once, here; only its SHA-256 is kept. Who may
 * share is decided before this is called.
 */
export async function createViewingLink(options: NewViewingLink): Promise<{ id: string; token: string; url: string }> {
  const { machineId, by, label, expiresAt, packetId = null, scope = usualScope } = options;
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
        scope: storeScope(scope),
      },
      transaction,
    ),
  );
  return { id, token, url: `${env.url}${paths.viewingLink(token)}` };
}
