import { createHash } from 'node:crypto';
import { mkdtempSync, rmSync } from 'node:fs';
import { open, readFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { Layer } from '@/lib/packet/layer/layer';
import { issueChain, readChain } from '@/lib/ports/issue-certificates';
import type { PacketCertificate } from '@/lib/ports/packet-certificate';
import { pageSigner, type PageSigner } from '@/lib/ports/sign-pages';

export const madeAt = '2026-04-18T23:32:05.120Z';
export const words = 'Engine oil always in time';

/** A packet certificate that no file holds. */
export function newCertificate(name = 'records.garage.example'): PacketCertificate {
  const chain = readChain(issueChain({ rootName: `${name} packet root`, leafName: `${name} packets` }));
  return { ...chain, sha256: createHash('sha256').update(chain.leaf.raw).digest('hex') };
}

/** Signs with a certificate, without a time stamp unless an authority is given. */
export const signerWith = (certificate: PacketCertificate, more: Parameters<typeof pageSigner>[0] = {}): PageSigner =>
  pageSigner({ certificate, stampedBy: [], ...more });

/**
 * A small packet, written by the packet's own layer: one page with `words`, and the files given, deflated.
 * `sign` stands in for a signer.
 */
export async function signedPacket(options: {
  files: { name: string; bytes: Uint8Array }[];
  sign: PageSigner['sign'];
}): Promise<Buffer> {
  const folder = mkdtempSync(path.join(tmpdir(), 'witnessmark-signed-'));
  try {
    const layer = new Layer();
    layer.addPage();
    layer.tag('P', () => layer.text(words, 100, 100, { face: 'semibold', size: 12 }));
    const file = await open(path.join(folder, 'packet.pdf'), 'w');
    const attachments = options.files.map(({ name, bytes }) => ({
      name,
      mediaType: name.endsWith('.json') ? 'application/json' : 'image/jpeg',
      description: name,
      relationship: 'Data' as const,
      changedAt: madeAt,
      content: bytes,
    }));
    const about = { title: 'Service record', subject: 'Service record', madeAt, identity: 'one' };
    const signature = { reason: 'Packet WM-ABCD-EFGH', madeAt, sign: options.sign };
    await layer.finish(file, about, attachments, signature, () => Promise.resolve());
    await file.close();
    return await readFile(path.join(folder, 'packet.pdf'));
  } finally {
    rmSync(folder, { recursive: true });
  }
}

/** Where the value of Contents stands, its brackets included, as the file itself says. */
export function holeIn(packet: Buffer): { start: number; end: number } {
  const range = /\/ByteRange \[0 (\d+) (\d+) \d+\]/.exec(packet.toString('latin1'));
  return { start: Number(range?.[1]), end: Number(range?.[2]) };
}

/** The digest that a detached signature over this packet must be over. */
export function signedDigest(packet: Buffer): Buffer {
  const { start, end } = holeIn(packet);
  return createHash('sha256').update(packet.subarray(0, start)).update(packet.subarray(end)).digest();
}

/** The same packet with another value in its hole. */
export function withContents(packet: Buffer, der: Uint8Array, behind = ''): Buffer {
  const { start, end } = holeIn(packet);
  const digits = (Buffer.from(der).toString('hex') + behind).padEnd(end - start - 2, '0');
  return Buffer.concat([packet.subarray(0, start + 1), Buffer.from(digits, 'latin1'), packet.subarray(end - 1)]);
}
