import 'server-only';
import {
  findViewingLink, lastTakenBack, readyPacketsOf, type PacketRow, type ViewingLinkRow,
} from '@/db/queries/viewing-links'; // prettier-ignore
import { notFound } from '@/lib/errors';
import { openPacketFile } from '@/lib/services/read-packet';

/**
 * The newest packet that a viewing link may hand out: built for exactly what the link opens, and carrying no link of
 * its own that would stay open longer than this one. Anything else would give its reader more than the owner chose. So
 * would one from before something was erased, or a blacked-out copy struck.
 */
export async function offeredPacket(link: ViewingLinkRow): Promise<PacketRow | null> {
  const takenBack = await lastTakenBack(link.machineId);
  for (const packet of await readyPacketsOf(link.machineId, link.scope)) {
    if (takenBack !== null && packet.createdAt <= takenBack) continue;
    const own = packet.linkId === null ? null : await findViewingLink(packet.linkId);
    if (own === null || endsWithin(own, link)) return packet;
  }
  return null;
}

function endsWithin(own: ViewingLinkRow, link: ViewingLinkRow): boolean {
  if (link.expiresAt === null || own.revokedAt !== null) return true;
  return own.expiresAt !== null && own.expiresAt <= link.expiresAt;
}

/** That packet's file. Throws `not-found` where the link has none to hand out. */
export async function openOfferedPacket(link: ViewingLinkRow) {
  const packet = await offeredPacket(link);
  if (packet === null) throw notFound('packet');
  return openPacketFile(packet);
}
