import { beforeAll, describe, expect, it } from 'vitest';
import { write } from '@/db/index';
import { findPacket, updatePacket } from '@/db/queries/packets';
import { findViewingLink, updateViewingLink } from '@/db/queries/viewing-links';
import { forSaleScope, type Scope } from '@/lib/domain/scope';
import { buildPacket, packetFile } from '@/lib/services/build-packet';
import { createViewingLink } from '@/lib/services/create-viewing-link';
import { eraseInput, erasePart } from '@/lib/services/erase-part';
import { listProof } from '@/lib/services/list-proof';
import { offeredPacket } from '@/lib/services/offered-packet';
import { readRecordFile } from '@/lib/services/read-record-file';
import { queuePacket } from '@/lib/services/request-packet';
import { whatCanBeOpened } from '@/lib/services/what-can-be-opened';
import { buildProofWorld } from '@/tests/setup/proof-world';
import { useTestDatabase } from '@/tests/setup/test-database';

useTestDatabase();
let world: Awaited<ReturnType<typeof buildProofWorld>>;
beforeAll(async () => {
  world = await buildProofWorld();
});

const usual: Scope = { closed: ['prices'] };
const nothing: Scope = { entries: { seqs: [] }, closed: [] };

describe('the files of a scope', () => {
  it('are those that an opened part names, whatever another reader was just given', async () => {
    const { machine, odometer, receiptPdf } = world;
    const fetched = async (sha256: string, scope: Scope) =>
      readRecordFile({ machineId: machine, sha256, kind: 'copy', scope }).then(
        async ({ body }) => {
          await body.cancel();
          return 'found';
        },
        ({ code }: { code?: string }) => code,
      );
    expect(await fetched(odometer, usual)).toBe('found');
    expect(await fetched(receiptPdf, usual)).toBe('found');
    // For sale, the photo of the work stays and the receipt does not.
    expect(await fetched(odometer, forSaleScope)).toBe('found');
    expect(await fetched(receiptPdf, forSaleScope)).toBe('not-found');
    for (const sha256 of [odometer, receiptPdf]) expect(await fetched(sha256, nothing)).toBe('not-found');
    expect(await fetched(receiptPdf, usual)).toBe('found');
  });
});

describe('a packet of a scope', () => {
  it('is offered only by a link of exactly its scope that its own link does not outlive', async () => {
    const { person, machine } = world;
    const link = async (scope: Scope, expiresAt: string | null = null) => {
      const { id } = await createViewingLink({ machineId: machine, by: person.id, label: 'a', expiresAt, scope });
      return (await findViewingLink(id))!;
    };
    const ready = async (scope: Scope) => {
      const { id } = await queuePacket({ machineId: machine, by: person.id, purpose: '', scope });
      const own = await link(scope);
      await write((transaction) => updatePacket(id, { state: 'ready', linkId: own.id }, transaction));
      return { id, own: own.id };
    };
    const offered = async (scope: Scope, expiresAt: string | null = null) =>
      (await offeredPacket(await link(scope, expiresAt)))?.id ?? null;
    const whole = await ready(usual);
    expect(await offered(usual)).toBe(whole.id);
    // Neither a wider nor a narrower one.
    expect(await offered(forSaleScope)).toBeNull();
    expect(await offered({ closed: [] })).toBeNull();
    const sale = await ready(forSaleScope);
    expect(await offered({ closed: [...forSaleScope.closed].reverse() })).toBe(sale.id);

    const end = '2099-01-01T00:00:00.000Z';
    expect(await offered(forSaleScope, end)).toBeNull();
    const setEnd = (expiresAt: string) => write((t) => updateViewingLink(sale.own, { expiresAt }, t));
    await setEnd('2099-01-01T00:00:00.001Z');
    expect(await offered(forSaleScope, end)).toBeNull();
    await setEnd(end);
    expect(await offered(forSaleScope, end)).toBe(sale.id);
  });

  it('carries a link of the same scope, and is listed by what it opens', async () => {
    const { person, machine } = world;
    const queued = await queuePacket({ machineId: machine, by: person.id, purpose: '', scope: forSaleScope });
    await buildPacket(queued);
    const built = await findPacket(queued.id);
    expect(built?.state).toBe('ready');
    expect((await findViewingLink(built?.linkId ?? ''))?.scope).toBe(built?.scope);
    expect(packetFile(queued.number)).toMatch(/WM-[0-9A-Z]{4}-[0-9A-Z]{4}\.pdf$/);
    const { packets, links } = await listProof({ person, machineId: machine, packetPage: 1, linkPage: 1, perPage: 10 });
    expect(packets[0]?.opens).toMatch(/^For sale: all entries, without prices, names of people, VIN/);
    expect(links[0]?.opens).toBe(packets[0]?.opens);
  });
});

describe('what can be opened', () => {
  it('is told with titles, days, pictures and the work done, to the owner alone', async () => {
    const { person, machine, technician, seq } = world;
    const { lines, purchases, items } = await whatCanBeOpened({ person, machineId: machine });
    expect(lines.map(({ kind }) => kind)).toEqual(['opening', 'terms', 'service']);
    expect(lines[seq]).toMatchObject({ pictures: 1, kind: 'service', finishedOn: expect.stringMatching(/^\d{4}-/) });
    expect(items.map(({ item }) => item)).toEqual([...(lines[seq]?.items ?? [])]);
    expect(purchases).toEqual([
      { usedBy: [seq], line: expect.objectContaining({ kind: 'purchase', hasPapers: true }) },
    ]);
    await expect(whatCanBeOpened({ person: technician, machineId: machine })).rejects.toMatchObject({
      code: 'not-found',
    });
  });
});

describe('a packet from before an erasure', () => {
  it('is offered by no link any more, whether something went from the machine or from its shelf', async () => {
    const { person, machine, shelf, purchase, seq } = world;
    const { id: linkId } = await createViewingLink({ machineId: machine, by: person.id, label: 'a', expiresAt: null });
    const link = (await findViewingLink(linkId))!;
    for (const { part, ...place } of [
      { subject: { machine }, seq, part: 'attachments' },
      { subject: { shelf }, seq: purchase, part: 'supplier' },
    ]) {
      const { id } = await queuePacket({ machineId: machine, by: person.id, purpose: '' });
      await write((transaction) => updatePacket(id, { state: 'ready' }, transaction));
      expect((await offeredPacket(link))?.id).toBe(id);
      await erasePart({ person, ...place, input: eraseInput.parse({ part, word: 'erase', key: crypto.randomUUID() }) });
      expect(await offeredPacket(link)).toBeNull();
    }
  });
});
