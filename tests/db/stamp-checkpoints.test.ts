import { randomUUID } from 'node:crypto';
import { describe, expect, it, vi } from 'vitest';
import { stampJobs, tokens } from '@/db/models/logs';
import { utf8 } from '@/lib/evidence/bytes';
import { sha256Hex } from '@/lib/evidence/hash';
import { isTokenOf, readToken } from '@/lib/evidence/token';
import { findCheckpoint } from '@/db/queries/logs';
import { atTime } from '@/lib/ports/clock';
import { ownAuthority } from '@/lib/ports/time-stamp-authority/own';
import { openLog } from '@/lib/services/open-log';
import { kickStamping, stampCheckpoint, stampingSettled } from '@/lib/services/stamp-checkpoints';
import { makePerson, useTestDatabase } from '../setup/test-database';

useTestDatabase();

const openShelf = async () => {
  const { id } = await makePerson();
  const shelf = { subject: 'shelf' as const, subjectId: randomUUID(), by: id };
  return openLog({ ...shelf, parts: async () => ({ body: { name: 'Imke’s shelf' } }) });
};
const minute = 60_000;

describe('stamping checkpoints', () => {
  it('stores a token over the whole signed note, with its hash and whose it is', async () => {
    const { log } = await openShelf();
    await stampingSettled();
    const [row] = await tokens.all({ logId: log });
    const der = new Uint8Array(Buffer.from(row?.token ?? '', 'base64'));
    const note = (await findCheckpoint(log, 1))?.note ?? '';
    expect(isTokenOf(readToken(der), note)).toBe(true);
    expect(isTokenOf(readToken(der), note.trimEnd())).toBe(false);
    expect(row).toMatchObject({ sha256: sha256Hex(der), authority: ownAuthority.name, isOwnAuthority: true });
    expect(row?.genTime).toBe(readToken(der).genTime);
    expect(utf8(note).length).toBeGreaterThan(100);
  });

  it('seals although the authority fails, keeps the reason, and waits longer each time', async () => {
    const start = Date.parse('2026-04-18T12:00:00.000Z');
    vi.spyOn(ownAuthority, 'stamp').mockRejectedValue(new Error('The authority does not answer.'));
    const { log } = await atTime(new Date(start), openShelf);
    const job = async () => stampJobs.find({ logId: log });
    expect(await job()).toMatchObject({
      attempts: 1,
      lastError: 'The authority does not answer.',
      doneAt: null,
      nextTryAt: new Date(start + minute).toISOString(),
    });
    const pauses: number[] = [];
    for (let attempt = 2; attempt <= 11; attempt += 1) {
      await atTime(new Date(start), () => stampCheckpoint(log, 1));
      pauses.push((Date.parse((await job())?.nextTryAt ?? '') - start) / minute);
    }
    expect(pauses).toEqual([2, 4, 8, 16, 32, 64, 128, 256, 360, 360]);
    expect(await tokens.count({ logId: log })).toBe(0);
  });

  it('takes a waiting job up when its time has come, not before', async () => {
    const start = Date.parse('2026-04-18T12:00:00.000Z');
    const silent = vi.spyOn(ownAuthority, 'stamp').mockRejectedValue(new Error('The authority does not answer.'));
    const { log } = await atTime(new Date(start), openShelf);
    silent.mockRestore();
    const runAt = async (time: number) => {
      await atTime(new Date(time), async () => kickStamping());
      await stampingSettled();
      return tokens.count({ logId: log });
    };
    expect(await runAt(start + minute - 1)).toBe(0);
    expect(await runAt(start + minute)).toBe(1);
    expect(await runAt(start + 2 * minute)).toBe(1);
  });

  it('keeps no token that does not answer its request', async () => {
    vi.spyOn(ownAuthority, 'stamp').mockResolvedValue(new Uint8Array([0x30, 0x03, 0x02, 0x01, 0x00]));
    const { log } = await openShelf();
    await stampingSettled();
    await stampCheckpoint(log, 1);
    expect(await tokens.count({ logId: log })).toBe(0);
    expect((await stampJobs.find({ logId: log }))?.lastError).toContain('The authority did not answer with');
  });

  it('keeps one token when two runs ask at once', async () => {
    const silent = vi.spyOn(ownAuthority, 'stamp').mockRejectedValue(new Error('The authority does not answer.'));
    const { log } = await atTime(new Date('2026-04-18T12:00:00.000Z'), openShelf);
    silent.mockRestore();
    await Promise.all([stampCheckpoint(log, 1), stampCheckpoint(log, 1)]);
    expect(await tokens.count({ logId: log })).toBe(1);
  });
});
