import 'server-only';
import { passkeysOf, type PasskeyRow } from '@/db/queries/passkeys';
import type { PersonRow } from '@/db/models/people';
import { fromBase64Url } from '@/lib/evidence/bytes';
import { sha256Hex } from '@/lib/evidence/hash';
import { passkeySite } from '@/lib/services/passkey-site';

export interface PasskeyLine {
  id: string;
  name: string;
  /** Hex SHA-256 of the public key, as records name it. */
  fingerprint: string;
  createdAt: string;
  lastUsedAt: string | null;
  /** The host it was made for, where that is another than the present one: it cannot be used here. */
  madeFor: string | null;
}

/** The keys a person has and has not removed. */
export async function listPasskeys({ person }: { person: PersonRow }): Promise<PasskeyLine[]> {
  const { rpId } = passkeySite();
  const rows = await passkeysOf(person.id);
  return rows
    .filter(({ revokedAt }) => revokedAt === null)
    .map(({ id, name, publicKey, createdAt, lastUsedAt, rpId: madeFor }) => ({
      id,
      name,
      fingerprint: sha256Hex(fromBase64Url(publicKey)),
      createdAt,
      lastUsedAt,
      madeFor: madeFor === rpId ? null : madeFor,
    }));
}

/** The keys with which a person can sign here and now. */
export async function usablePasskeys({ personId }: { personId: string }): Promise<PasskeyRow[]> {
  const { rpId, refusal } = passkeySite();
  if (refusal !== null) return [];
  return (await passkeysOf(personId)).filter((key) => key.revokedAt === null && key.rpId === rpId);
}
