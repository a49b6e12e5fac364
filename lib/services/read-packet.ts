import 'server-only';
import { createReadStream } from 'node:fs';
import { stat } from 'node:fs/promises';
import type { PersonRow } from '@/db/queries/people';
import { findPacket, type PacketRow } from '@/db/queries/packets';
import { authorise } from '@/lib/auth/guard';
import { WitnessmarkError, notFound } from '@/lib/errors';
import { packetFile } from '@/lib/services/build-packet';
import { piecesOf, pullStream } from '@/lib/services/pull-stream';

export interface PacketProgress {
  id: string;
  number: string;
  purpose: string;
  state: PacketRow['state'];
  stage: string;
  /** 0 to 100. */
  progress: number;
  error: string | null;
  createdAt: string;
  finishedAt: string | null;
  bytes: number | null;
  pages: number | null;
}

export const packetProgress = (row: PacketRow): PacketProgress => ({
  id: row.id,
  number: row.number,
  purpose: row.purpose,
  state: row.state,
  stage: row.stage,
  progress: row.progress,
  error: row.error,
  createdAt: row.createdAt,
  finishedAt: row.finishedAt,
  bytes: row.bytes,
  pages: row.pages,
});

/** How far a packet is, for its machine's owner. */
export async function readPacket(options: { person: PersonRow; id: string }): Promise<PacketRow> {
  const packet = await findPacket(options.id);
  if (packet === null) throw notFound('packet');
  await authorise({ person: options.person, action: 'share', machine: packet.machineId });
  return packet;
}

/** The packet as an attachment. Throws `conflict` while it is being built. Who may read it is decided before. */
export async function openPacketFile(packet: PacketRow): Promise<{ body: ReadableStream; headers: HeadersInit }> {
  if (packet.state === 'failed') {
    throw new WitnessmarkError('gone', packet.error ?? 'This packet could not be built. Ask for a new one.');
  }
  if (packet.state !== 'ready') {
    throw new WitnessmarkError('conflict', 'This packet is still being built. Try again in a moment.');
  }
  const file = packetFile(packet.number);
  const size = await stat(file).then(
    (found) => found.size,
    () => null,
  );
  if (size === null) throw new WitnessmarkError('gone', 'The file of this packet is gone. Ask for a new one.');
  return {
    body: pullStream(piecesOf(createReadStream(file))),
    headers: {
      'Content-Type': 'application/pdf',
      'Content-Length': String(size),
      'Content-Disposition': `attachment; filename="${packet.number}.pdf"`,
      'Content-Security-Policy': "sandbox; default-src 'none'",
      'Cache-Control': 'private, no-store',
    },
  };
}
