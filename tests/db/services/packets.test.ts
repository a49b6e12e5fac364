import { createHash } from 'node:crypto';
import { chmodSync, existsSync, mkdirSync, readFileSync } from 'node:fs';
import { describe, expect, it, vi } from 'vitest';
import { write } from '@/db/index';
import { findPacket, updatePacket } from '@/db/queries/packets';
import { findViewingLink, viewingLinksOfMachine } from '@/db/queries/viewing-links';
import { packetCertificateFile } from '@/lib/ports/packet-certificate';
import { packetFile, resumePackets } from '@/lib/services/build-packet';
import { openPacketFile, readPacket } from '@/lib/services/read-packet';
import { queuePacket, requestPacket, requestPacketInput } from '@/lib/services/request-packet';
import { makePerson, useTestDatabase } from '../../setup/test-database';
import { riderWithMachine } from './garage-story';

useTestDatabase();

describe('a packet asked for', () => {
  it('is queued with a number to read out, built in the background, and kept as the file its row names', async () => {
    const { person, machine } = await riderWithMachine();
    const input = requestPacketInput.parse({ purpose: ' a warranty claim ' });
    const queued = await requestPacket({ person, machineId: machine, input });
    expect(queued).toMatchObject({ state: 'queued', progress: 0, purpose: 'a warranty claim' });
    expect(queued.number).toMatch(/^WM-[2-9A-HJKMNP-TV-Z]{4}-[2-9A-HJKMNP-TV-Z]{4}$/);

    await resumePackets();
    const ready = await readPacket({ person, id: queued.id });
    expect(ready).toMatchObject({ state: 'ready', stage: 'Ready', progress: 100, error: null, logSize: 2 });
    const bytes = readFileSync(packetFile(queued.number));
    expect(bytes.length).toBe(ready.bytes);
    expect(createHash('sha256').update(bytes).digest('hex')).toBe(ready.fileSha256);
    expect(existsSync(`${packetFile(queued.number)}.part`)).toBe(false);

    const { headers } = await openPacketFile(ready);
    expect(headers).toMatchObject({ 'Content-Disposition': `attachment; filename="${queued.number}.pdf"` });
  });

  it('has a viewing link of its own, which ends when an interrupted packet is built anew', async () => {
    const { person, machine } = await riderWithMachine();
    const { id, number } = await queuePacket({ machineId: machine, by: person.id, purpose: '' });
    await resumePackets();
    const first = (await findPacket(id))?.linkId ?? '';
    expect(await findViewingLink(first)).toMatchObject({ label: `Packet ${number}`, packetId: id, revokedAt: null });

    // As a server leaves it that was stopped in the middle.
    await write((transaction) => updatePacket(id, { state: 'building', progress: 40 }, transaction));
    await resumePackets();
    const after = await findPacket(id);
    expect(after?.state).toBe('ready');
    expect(after?.linkId).not.toBe(first);
    expect((await findViewingLink(first))?.revokedAt).not.toBeNull();
    expect((await viewingLinksOfMachine(machine)).filter(({ revokedAt }) => revokedAt === null)).toHaveLength(1);
  });

  it('is nobody else’s: a stranger finds neither the machine nor the packet', async () => {
    const { person, machine } = await riderWithMachine();
    const stranger = await makePerson();
    const { id } = await queuePacket({ machineId: machine, by: person.id, purpose: '' });
    const input = { purpose: '' };
    await expect(requestPacket({ person: stranger, machineId: machine, input })).rejects.toMatchObject({ code: 'not-found' }); // prettier-ignore
    await expect(readPacket({ person: stranger, id })).rejects.toMatchObject({ code: 'not-found' });
    const waiting = await findPacket(id);
    await expect(openPacketFile(waiting!)).rejects.toMatchObject({ code: 'conflict' });
    await resumePackets();
  });

  it('that cannot be built says so in a sentence, and the next one is built all the same', async () => {
    const { person, machine } = await riderWithMachine();
    const lost = await queuePacket({ machineId: machine, by: person.id, purpose: '' });
    const good = await queuePacket({ machineId: machine, by: person.id, purpose: '' });
    // A folder stands where the file would be written.
    mkdirSync(`${packetFile(lost.number)}.part`, { recursive: true });
    const said = vi.spyOn(console, 'error').mockImplementation(() => undefined);
    await resumePackets();
    expect(said).toHaveBeenCalledOnce();
    expect(await findPacket(lost.id)).toMatchObject({
      state: 'failed',
      error: 'The packet could not be built. Ask for it again; if it fails again, tell the steward.',
    });
    expect((await findPacket(good.id))?.state).toBe('ready');
  });

  it('fails with a sentence while the packet certificate cannot be used, and can be asked for again afterwards', async () => {
    const { person, machine } = await riderWithMachine();
    const { id } = await queuePacket({ machineId: machine, by: person.id, purpose: '' });
    chmodSync(packetCertificateFile(), 0o640);
    const said = vi.spyOn(console, 'error').mockImplementation(() => undefined);
    await resumePackets();
    const failed = await findPacket(id);
    expect(failed).toMatchObject({ state: 'failed', linkId: null });
    expect(failed?.error).toContain('packet certificate cannot be used. Tell the steward');
    // The steward reads why, and what to do.
    expect(said).toHaveBeenCalledWith(expect.any(String), expect.stringContaining('chmod 600'));
    chmodSync(packetCertificateFile(), 0o600);
    const again = await queuePacket({ machineId: machine, by: person.id, purpose: '' });
    await resumePackets();
    expect((await findPacket(again.id))?.state).toBe('ready');
  });

  it('refuses a purpose that is too long or holds a direction character', () => {
    expect(requestPacketInput.safeParse({ purpose: 'x'.repeat(200) }).success).toBe(true);
    expect(requestPacketInput.safeParse({ purpose: 'x'.repeat(201) }).success).toBe(false);
    expect(requestPacketInput.safeParse({ purpose: 'claim\u202e' }).success).toBe(false);
  });
});
