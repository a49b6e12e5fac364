import 'server-only';
import { mkdir, open, rename, rm } from 'node:fs/promises';
import path from 'node:path';
import { setImmediate as nextTurn } from 'node:timers/promises';
import pLimit, { type LimitFunction } from 'p-limit';
import { write } from '@/db/index';
import { machineById } from '@/db/queries/machines';
import { findPacket, unfinishedPackets, updatePacket, type PacketRow } from '@/db/queries/packets';
import { findPerson } from '@/db/queries/people';
import { updateViewingLink } from '@/db/queries/viewing-links';
import { readScope } from '@/lib/domain/stored-scope';
import { env } from '@/lib/env';
import { WitnessmarkError, notFound } from '@/lib/errors';
import { nameFiles, type PacketContent, type PacketFile } from '@/lib/packet/content';
import { drawPacket, type Progress } from '@/lib/packet/draw-packet';
import { jpegSizeOf } from '@/lib/packet/layer/jpeg';
import { blobStore } from '@/lib/ports/blob-store';
import { now } from '@/lib/ports/clock';
import { bundleRecord } from '@/lib/services/bundle-record';
import { createViewingLink } from '@/lib/services/create-viewing-link';
import { packetSigner } from '@/lib/services/packet-signing';
import { readRecord } from '@/lib/services/read-record';

/** Next may load a module twice in one process; packets are built one at a time all the same. */
const shared = globalThis as typeof globalThis & { witnessmarkPacketQueue?: LimitFunction };

export const packetFile = (number: string): string => path.join(env.dataFolder, 'packets', `${number}.pdf`);

/** Builds what is queued, in the background. */
export function kickPackets(): void {
  buildQueued().catch((error: unknown) => console.error('The queue of packets stopped.', error));
}

/** At start: what an earlier run left queued or half built is built anew. Resolves when nothing is queued any more. */
export function resumePackets(): Promise<void> {
  return buildQueued();
}

function buildQueued(): Promise<void> {
  shared.witnessmarkPacketQueue ??= pLimit(1);
  return shared.witnessmarkPacketQueue(async () => {
    for (;;) {
      const [next] = await unfinishedPackets();
      if (next === undefined) return;
      await buildPacket(next);
    }
  });
}

/** Builds one packet; its row says how it went. Only for whoever holds the queue, or a script without a server. */
export async function buildPacket(packet: PacketRow): Promise<void> {
  try {
    await build(packet);
  } catch (error) {
    const isOurs = error instanceof WitnessmarkError;
    // A refusal speaks to the person who asked; what the steward needs stands in its log.
    const told = isOurs ? error.log : error;
    if (told !== undefined) console.error(`Packet ${packet.number} could not be built.`, told);
    const sentence = isFull(error)
      ? 'This server has no room left for the packet. Tell the steward, then ask for it again.'
      : isOurs
        ? error.message
        : 'The packet could not be built. Ask for it again; if it fails again, tell the steward.';
    await update(packet.id, { state: 'failed', stage: 'Not built', error: sentence, finishedAt: now().toISOString() });
  }
}

const isFull = (error: unknown) => ['ENOSPC', 'EDQUOT'].includes((error as NodeJS.ErrnoException).code ?? '');

const update = (id: string, values: Parameters<typeof updatePacket>[1]) =>
  write((transaction) => updatePacket(id, values, transaction));

async function build(packet: PacketRow): Promise<void> {
  await update(packet.id, { state: 'building', stage: 'Reading the record', progress: 2, error: null });
  const signer = packetSigner();
  const link = await mintLink(packet);
  const content = await gather(packet, link.url, signer);
  const target = packetFile(packet.number);
  const temporary = `${target}.part`;
  await mkdir(path.dirname(target), { recursive: true });
  try {
    const file = await open(temporary, 'w', 0o600);
    let drawn;
    try {
      drawn = await drawPacket(content, file, progressOf(packet.id));
      await file.sync();
    } finally {
      await file.close();
    }
    await rename(temporary, target);
    await syncFolder(path.dirname(target));
    await update(packet.id, {
      state: 'ready',
      stage: 'Ready',
      progress: 100,
      finishedAt: now().toISOString(),
      fileSha256: drawn.sha256,
      bytes: drawn.bytes,
      pages: drawn.pages,
      logSize: content.record.log.size,
    });
  } catch (error) {
    await rm(temporary, { force: true });
    throw error;
  }
}

async function syncFolder(folder: string): Promise<void> {
  const handle = await open(folder, 'r');
  await handle.sync();
  await handle.close();
}

/** A token is known only while it is minted; a packet built anew gets a new link, and the old one ends. */
async function mintLink(packet: PacketRow): Promise<{ url: string }> {
  const row = await findPacket(packet.id);
  const old = row?.linkId ?? null;
  const { number, machineId, createdBy, purpose } = packet;
  const label = purpose === '' ? `Packet ${number}` : `Packet ${number}: ${purpose}`;
  const scope = readScope(packet.scope);
  const link = await createViewingLink({
    machineId,
    by: createdBy,
    label,
    expiresAt: null,
    packetId: packet.id,
    scope,
  });
  await write(async (transaction) => {
    await updatePacket(packet.id, { linkId: link.id }, transaction);
    if (old !== null) await updateViewingLink(old, { revokedAt: now().toISOString() }, transaction);
  });
  return link;
}

const mostReadings = 5;

/** Record and bundle of the same moment: an entry sealed between the two makes it read both again. */
async function gather(packet: PacketRow, link: string, signer: PacketContent['signer']): Promise<PacketContent> {
  const { machineId, number, purpose } = packet;
  const [machine, owner] = await Promise.all([machineById(machineId), findPerson(packet.createdBy)]);
  if (machine === null || owner === null) throw notFound('machine');
  const scope = readScope(packet.scope);
  // Whoever asks for the packet is its owner on the cover, unless names stay closed.
  const name = scope.closed.includes('names') ? null : owner.name;
  for (let reading = 0; reading < mostReadings; reading++) {
    const record = await readRecord({ machineId, scope });
    const files = await filesOf(record);
    const included = new Map([...files].map(([sha256, { name }]) => [sha256, name]));
    const packetCertificate = signer.certificate;
    const { text, bundle } = await bundleRecord({ machineId, purpose, number, scope, included, packetCertificate });
    const sizes = new Map(bundle.logs.map(({ id, entries }) => [id, entries.length]));
    const logs = [record.log, ...record.shelves.map((shelf) => shelf.log)];
    if (!logs.every(({ id, size }) => sizes.get(id) === size)) continue;
    const { madeAt } = bundle;
    const zone = machine.timeZone;
    const about = { number, purpose, madeAt, zone, owner: name, scope, link, site: env.url };
    return { ...about, record, recordJson: text, signer, files };
  }
  throw new WitnessmarkError('conflict', 'The record kept growing while it was read. Ask for the packet again.');
}

async function filesOf(record: PacketContent['record']): Promise<Map<string, PacketFile>> {
  const files = new Map<string, PacketFile>();
  for (const [sha256, { name, mediaType }] of nameFiles(record)) {
    if (!(await blobStore.has(sha256))) continue;
    const source = { bytes: await blobStore.size(sha256), open: () => blobStore.open(sha256) };
    const size = mediaType === 'image/jpeg' ? await jpegSizeOf(source.open()) : null;
    files.set(sha256, { sha256, name, mediaType, source, size });
  }
  return files;
}

const stages = {
  drawing: { words: 'Drawing the pages', from: 5, to: 60 },
  writing: { words: 'Writing the file', from: 60, to: 99 },
} as const;
const smallestStep = 4;

/** Tells the row in steps that a person would notice, and lets other requests through in between. */
function progressOf(id: string): Progress {
  let told = 0;
  return async (stage, done) => {
    const { words, from, to } = stages[stage];
    const progress = Math.round(from + (to - from) * done);
    if (progress - told >= smallestStep) {
      told = progress;
      await update(id, { stage: words, progress });
    }
    await nextTurn();
  };
}
