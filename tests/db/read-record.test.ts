import { randomUUID } from 'node:crypto';
import { describe, expect, it, vi } from 'vitest';
import { ownAuthority } from '@/lib/ports/time-stamp-authority/own';
import { readRecord, readShelf } from '@/lib/services/read-record';
import { readCheckpoint } from '@/lib/services/read-checkpoint';
import { stampingSettled } from '@/lib/services/stamp-checkpoints';
import { countersignatureBody, odometerPhoto, receiptFront, sealRecord } from '../setup/sealed-record';
import { useTestDatabase } from '../setup/test-database';

useTestDatabase();

describe('reading a record', () => {
  it('says what was sealed, entry by entry', async () => {
    const { machineId, machine, service, rider } = await sealRecord();
    await stampingSettled();
    const record = await readRecord({ machineId });
    expect(record.machine).toEqual({
      id: machineId,
      name: '2022 Corvane Sorrel 1800',
      make: 'Corvane',
      model: 'Sorrel 1800',
      modelYear: '2022',
      kind: 'motorcycle',
    });
    expect(record.identity).toEqual({ vin: 'AAACRVSR3NA000417' });
    expect(record.entries.map(({ seq, title, state }) => [seq, title, state])).toEqual([
      [0, 'Record opened', 'sealed'],
      [1, 'Terms', 'sealed'],
      [2, 'Engine oil and filter', 'sealed'],
    ]);
    expect(record.terms).toBe(record.termsBySeq.get(1));
    expect(record.entries[2]).toMatchObject({
      kind: 'service',
      leafHash: service.leafHash,
      sealedAt: service.sealedAt,
      author: { person: rider.id, role: 'owner' },
      attachments: [odometerPhoto],
      notes: 'Drain plug washer new.',
      withheld: [],
      struckBy: null,
    });
    const { size, root, note, verifierKey, fingerprint } = await readCheckpoint(machine.log);
    expect(record.log).toMatchObject({ id: machine.log, size: 3, root, checkpoint: note, verifierKey, fingerprint });
    expect(size).toBe(3);
  });

  it('brings the purchases drawn, without those not drawn and without prices', async () => {
    const { machineId, shelf, purchase } = await sealRecord();
    const [drawn, ...others] = (await readRecord({ machineId })).shelves;
    expect(others).toEqual([]);
    expect(drawn).toMatchObject({ log: { id: shelf.log }, size: 3 });
    expect(drawn?.purchases).toHaveLength(1);
    expect(drawn?.purchases[0]).toMatchObject({
      seq: purchase.seq,
      leafHash: purchase.leafHash,
      supplier: { name: 'Brandywell Powersports' },
      prices: null,
      attachments: [receiptFront],
      usedBy: [2],
      withheld: ['prices'],
    });
    const own = await readRecord({ machineId, scope: { closed: [] } });
    expect(own.shelves[0]?.purchases[0]?.prices?.total).toBe('7194');
  });

  it('shows an entry whose stamp failed as waiting, until a later checkpoint is stamped', async () => {
    const { machineId, machine, service, seal } = await sealRecord();
    await stampingSettled();
    const silent = vi.spyOn(ownAuthority, 'stamp').mockRejectedValue(new Error('The authority does not answer.'));
    await seal(machine.log, 'addendum', { body: { text: 'Checked hot.' } }, service);
    await stampingSettled();
    const before = await readRecord({ machineId });
    expect(before.entries.map(({ state }) => state)).toEqual(['sealed', 'sealed', 'sealed', 'waiting']);
    silent.mockRestore();
    await seal(machine.log, 'addendum', { body: { text: 'Checked again.' } }, service);
    await stampingSettled();
    const after = await readRecord({ machineId });
    expect(after.entries.map(({ state }) => state)).toEqual(['sealed', 'sealed', 'sealed', 'sealed', 'sealed']);
    // The stamp over size 5 is the earliest that covers both addenda.
    expect(after.entries[3]?.tokens).toEqual(after.entries[4]?.tokens);
    expect(after.entries[2]?.tokens).not.toEqual(after.entries[4]?.tokens);
  });

  it('shows a countersignature at the entry it stands under, and not once it is struck', async () => {
    const { machineId, machine, service, seal } = await sealRecord();
    const signed = await seal(machine.log, 'countersignature', { body: countersignatureBody }, service);
    const before = await readRecord({ machineId });
    expect(before.entries[2]).toMatchObject({
      state: 'countersigned',
      countersignatures: [{ seq: 3, body: { capacity: 'inspected' } }],
    });
    expect(before.entries[3]?.title).toBe('Countersigned by Halyard Cycle Works');
    await seal(machine.log, 'strike', { body: { reason: 'Wrong machine.' } }, signed);
    const after = await readRecord({ machineId });
    expect(after.entries[2]).toMatchObject({ countersignatures: [] });
    expect(after.entries[2]?.state).not.toBe('countersigned');
    expect(after.entries[3]).toMatchObject({ state: 'struck', struckBy: { seq: 4, reason: 'Wrong machine.' } });
  });

  it('shows a struck entry as struck, and as standing again when the strike is struck', async () => {
    const { machineId, machine, service, seal } = await sealRecord();
    const strike = await seal(machine.log, 'strike', { body: { reason: 'Typing error.' } }, service);
    expect((await readRecord({ machineId })).entries[2]).toMatchObject({ state: 'struck', struckBy: { seq: 3 } });
    await seal(machine.log, 'strike', { body: { reason: 'It was right.' } }, strike);
    const record = await readRecord({ machineId });
    expect(record.entries[2]?.struckBy).toBeNull();
    expect(record.entries[3]).toMatchObject({ title: 'Strike of entry 2', state: 'struck' });
  });

  it('lists addenda at the entry they add to', async () => {
    const { machineId, machine, service, seal } = await sealRecord();
    await seal(machine.log, 'addendum', { body: { text: 'Checked hot after the first ride.' } }, service);
    const record = await readRecord({ machineId });
    expect(record.entries[2]?.addenda).toEqual([3]);
    expect(record.entries[3]?.title).toBe('Addendum to entry 2');
  });

  it('takes the newest terms that were not struck', async () => {
    const { machineId, machine, seal } = await sealRecord();
    const body = { schedule: [], fluidPoints: [], fasteners: [], parts: [], warranty: [] };
    const newer = await seal(machine.log, 'terms', { body });
    expect((await readRecord({ machineId })).terms).toEqual(body);
    await seal(machine.log, 'strike', { body: { reason: 'Another manual.' } }, newer);
    const record = await readRecord({ machineId });
    expect(record.terms).toBe(record.termsBySeq.get(1));
    expect([...record.termsBySeq.keys()]).toEqual([1, 3]);
  });

  it('answers “not found” for a machine without a record and for a shelf’s number', async () => {
    const { shelfId } = await sealRecord();
    await expect(readRecord({ machineId: randomUUID() })).rejects.toMatchObject({ code: 'not-found' });
    await expect(readRecord({ machineId: shelfId })).rejects.toMatchObject({ code: 'not-found' });
  });
});

describe('reading a shelf', () => {
  it('shows its owners every purchase with its prices, in order', async () => {
    const { shelfId, shelf, purchase, seal } = await sealRecord();
    await seal(shelf.log, 'strike', { body: { reason: 'Returned.' } }, purchase);
    const view = await readShelf({ shelfId });
    expect(view.name).toBe('Imke’s shelf');
    expect(view.entries.map(({ kind }) => kind)).toEqual(['opening', 'purchase', 'purchase', 'strike']);
    expect(view.entries[2]?.purchase).toMatchObject({
      prices: { total: '7194' },
      withheld: [],
      struckBy: { reason: 'Returned.' },
    });
    expect(view.entries[3]).toMatchObject({ body: { reason: 'Returned.' }, refersTo: { seq: 2 } });
  });
});
