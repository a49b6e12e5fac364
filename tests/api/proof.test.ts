import { createHash } from 'node:crypto';
import { mkdirSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { beforeAll, describe, expect, it } from 'vitest';
import { write } from '@/db/index';
import { findViewingLink, updateViewingLink } from '@/db/queries/viewing-links';
import { updatePacket } from '@/db/queries/packets';
import { forSaleScope, type Scope } from '@/lib/domain/scope';
import { verifyBundle } from '@/lib/evidence/verify';
import { packetFile } from '@/lib/services/build-packet';
import { createViewingLink } from '@/lib/services/create-viewing-link';
import { queuePacket } from '@/lib/services/request-packet';
import { revokeViewingLink } from '@/lib/services/revoke-viewing-link';
import { buildProofWorld } from '@/tests/setup/proof-world';
import { cookieOf, readerCookieOf, useServer } from '@/tests/setup/server';
import { useTestDatabase } from '@/tests/setup/test-database';

useTestDatabase();
const server = useServer();
let world: Awaited<ReturnType<typeof buildProofWorld>>;
beforeAll(async () => {
  world = await buildProofWorld();
});

const makeLink = (expiresAt: string | null = null) =>
  createViewingLink({ machineId: world.machine, by: world.person.id, label: 'for the adjuster', expiresAt });
const readerOf = (link: string) => readerCookieOf({ links: [link] });
/** Everything behind a link that a reader can ask for. */
const addressesOf = (link: string) => [
  `/view/${link}`,
  `/view/${link}/entries/${world.seq}`,
  `/api/view/${link}/record.json`,
  `/api/view/${link}/packet`,
  `/api/view/${link}/files/${world.odometer}/thumb`,
];

describe('a viewing link', () => {
  it('swaps its address for a cookie and leads to an address without the secret', async () => {
    const { id, token } = await makeLink();
    const answer = await server.request.get(`/v/${token}`).redirects(0).expect(303);
    expect(answer.headers.location).toBe(`/view/${id}`);
    expect(answer.headers['cache-control']).toContain('no-store');
    expect(answer.headers['x-robots-tag']).toBe('noindex');
    // Of several policies a browser takes the last one it knows (W3C Referrer Policy, section 8.1).
    expect(answer.headers['referrer-policy']).toMatch(/(^|, )no-referrer$/);
    const cookie = String(answer.headers['set-cookie']).split(';')[0] ?? '';
    const page = await server.request.get(`/view/${id}`).set('cookie', cookie).expect(200);
    expect(page.text).toContain('AAACRVSR3NA000417');
    expect(page.text).toContain('Not shown: that a statement was true');
    expect(page.text).not.toContain(token);
    expect(page.text).not.toContain('for the adjuster');
    expect((await findViewingLink(id))?.timesOpened).toBe(1);
  });

  it('opens nothing for a browser that did not come by its address, not even for the machine’s owner', async () => {
    const { id } = await makeLink();
    for (const address of addressesOf(id)) {
      await server.request.get(address).expect(404);
      await server.request
        .get(address)
        .set('cookie', await cookieOf(world.person))
        .expect(404);
    }
  });

  it('ends at the next request after it was revoked, everywhere', async () => {
    const { id, token } = await makeLink();
    const cookie = await readerOf(id);
    await server.request.get(`/view/${id}`).set('cookie', cookie).expect(200);
    await revokeViewingLink({ person: world.person, id });
    for (const address of addressesOf(id)) {
      const first = await server.request.get(address).set('cookie', cookie).redirects(0);
      // A page cannot answer 410 itself; it leads to the address that does.
      const next = first.headers.location as string | undefined;
      const last = next === undefined ? first : await server.request.get(next).set('cookie', cookie).redirects(0);
      expect({ address, status: last.status }).toEqual({ address, status: 410 });
    }
    const page = await server.request.get(`/v/${token}`).expect(410);
    expect(page.text).toContain('revoked this viewing link. Ask them for a new one.');
  });

  it.each([
    ['opens a second before it runs out', 1000, 303],
    ['is gone at the very moment', 0, 410],
    ['is gone a second after', -1000, 410],
  ])('%s', async (_title, leftMs, status) => {
    const { id, token } = await makeLink();
    // The server’s clock runs on while this is sent, so the first case gets a minute.
    const end = new Date(Date.now() + (leftMs > 0 ? 60 * leftMs : leftMs)).toISOString();
    await write((transaction) => updateViewingLink(id, { expiresAt: end }, transaction));
    await server.request.get(`/v/${token}`).redirects(0).expect(status);
  });

  it('hands out pictures and papers that a sealed entry names, and no other file of the machine', async () => {
    const { id } = await makeLink();
    const cookie = await readerOf(id);
    const file = (sha256: string, kind: string) =>
      server.request.get(`/api/view/${id}/files/${sha256}/${kind}`).set('cookie', cookie);
    const plate = await file(world.odometer, 'plate').expect(200);
    expect(plate.headers['content-type']).toBe('image/jpeg');
    expect(plate.headers['cache-control']).toContain('no-store');
    const paper = await file(world.receiptPdf, 'copy').expect(200);
    expect(paper.headers['content-disposition']).toBe(`attachment; filename="${world.receiptPdf.slice(0, 16)}.pdf"`);
    await file(world.unsealed, 'plate').expect(404);
    await file(world.odometer, 'original').expect(404);
    await file('0'.repeat(64), 'plate').expect(404);
  });

  it('gives out a record that checks as unchanged with the key published here', async () => {
    const { id } = await makeLink();
    const bundle = await server.request
      .get(`/api/view/${id}/record.json`)
      .set('cookie', await readerOf(id))
      .expect(200);
    const keys = await server.request.get('/api/log-keys').expect(200);
    const finding = verifyBundle({ bundleText: bundle.text, key: keys.body.keys[0].verifierKey });
    expect(finding.alterations).toEqual([]);
    expect(finding.outcome).toBe('unchanged');
    expect(finding.entries.flatMap(({ openedParts }) => openedParts.map(({ name }) => name))).not.toContain('prices');
    expect(bundle.text).not.toContain('for the adjuster');
  });

  it('says what to do when its address was not copied whole', async () => {
    const page = await server.request.get('/v/abc').expect(404);
    expect(page.headers['content-type']).toContain('text/html');
    expect(page.text).toContain('complete to its last letter');
  });

  it('lets an address try fifty times in a quarter of an hour, and not once more', async () => {
    const from = { 'x-forwarded-for': '198.51.100.7' };
    const guess = async () => (await server.request.get(`/v/${'A'.repeat(22)}`).set(from)).status;
    const { token } = await makeLink();
    // A right address forgives the wrong ones before it.
    await server.request.get(`/v/${token}`).set(from).redirects(0).expect(303);
    for (let count = 1; count <= 50; count += 1) expect(await guess()).toBe(404);
    expect(await guess()).toBe(429);
    // Even the right one must wait now.
    await server.request.get(`/v/${token}`).set(from).redirects(0).expect(429);
  });
});

describe('the program for checking at home', () => {
  it('is the file whose SHA-256 the method page names', async () => {
    const program = await fetch(`${server.url}/verify.mjs`);
    expect(program.headers.get('content-disposition')).toContain('attachment');
    const sha256 = createHash('sha256')
      .update(new Uint8Array(await program.arrayBuffer()))
      .digest('hex');
    const page = await server.request.get('/method').expect(200);
    expect(page.text).toContain(sha256.slice(0, 8));
    expect(page.text.replace(/<[^>]*>/g, '')).toContain(sha256);
  });
});

describe('a viewing link that opens a part', () => {
  const linkWith = async (scope: Scope, expiresAt: string | null = null) => {
    const { id } = await createViewingLink({
      machineId: world.machine,
      by: world.person.id,
      label: 'for a buyer',
      expiresAt,
      scope,
    });
    const cookie = await readerOf(id);
    return { id, get: (address: string) => server.request.get(address).set('cookie', cookie) };
  };

  it('hands out no picture and no paper of what is closed, by whatever name', async () => {
    const noPapers = await linkWith(forSaleScope);
    const file = (id: string, sha256: string, kind: string) => `/api/view/${id}/files/${sha256}/${kind}`;
    await noPapers.get(file(noPapers.id, world.odometer, 'plate')).expect(200);
    for (const kind of ['thumb', 'plate', 'copy'])
      await noPapers.get(file(noPapers.id, world.receiptPdf, kind)).expect(404);
    const nothing = await linkWith({ entries: { seqs: [] }, closed: [] });
    for (const sha256 of [world.odometer, world.receiptPdf]) {
      for (const kind of ['thumb', 'plate', 'copy']) await nothing.get(file(nothing.id, sha256, kind)).expect(404);
    }
    // What one link remembers of its files is not what another one opens.
    const usual = await linkWith({ closed: ['prices'] });
    await usual.get(file(usual.id, world.receiptPdf, 'copy')).expect(200);
    await noPapers.get(file(noPapers.id, world.receiptPdf, 'copy')).expect(404);
  });

  it('for sale shows neither names nor VIN on its pages, and gives out a record that checks', async () => {
    const { id, get } = await linkWith(forSaleScope);
    for (const address of [`/view/${id}`, `/view/${id}/entries/0`, `/view/${id}/entries/${world.seq}`]) {
      const page = await get(address).expect(200);
      expect(page.text).not.toContain('AAACRVSR3NA000417');
      expect(page.text).not.toContain(world.person.name);
    }
    const bundle = await get(`/api/view/${id}/record.json`).expect(200);
    const finding = verifyBundle({ bundleText: bundle.text });
    expect(finding.outcome).toBe('unchanged');
    const opened = JSON.stringify(finding.entries.map(({ openedParts }) => openedParts));
    expect(opened).toContain('Fernhill');
    for (const secret of ['AAACRVSR3NA000417', world.person.name]) expect(opened).not.toContain(secret);
  });

  it('shows a closed entry as a line that is withheld, and gives no verdict', async () => {
    const { id, get } = await linkWith({ entries: { seqs: [] }, closed: ['prices'] });
    const page = (await get(`/view/${id}`).expect(200)).text.replace(/<!-- -->/g, '');
    expect(page).toContain('Service, withheld');
    expect(page).toContain('what is withheld is not judged');
    expect(page).not.toContain('always in time');
    const entry = await get(`/view/${id}/entries/${world.seq}`).expect(200);
    expect(entry.text).toContain('Its text is withheld');
  });

  it('whose stored choice cannot be read opens as little as there is', async () => {
    const { id, get } = await linkWith(forSaleScope);
    await write((transaction) => updateViewingLink(id, { scope: '{"closed":["prices","later"]}' }, transaction));
    await get(`/api/view/${id}/files/${world.odometer}/plate`).expect(404);
    const page = await get(`/view/${id}`).expect(200);
    expect(page.text).not.toContain('AAACRVSR3NA000417');
    expect(page.text).toContain('Service, withheld');
  });

  it('offers only a packet that opens exactly the same, and whose own link does not outlive it', async () => {
    const soon = new Date(Date.now() + 86_400_000).toISOString();
    const packetOf = async (scope: Scope) => {
      const row = await queuePacket({ machineId: world.machine, by: world.person.id, purpose: '', scope });
      const own = await linkWith(scope);
      mkdirSync(path.dirname(packetFile(row.number)), { recursive: true });
      writeFileSync(packetFile(row.number), 'a packet');
      await write((transaction) => updatePacket(row.id, { state: 'ready', linkId: own.id }, transaction));
      return { own: own.id };
    };
    await packetOf({ closed: ['prices'] });
    const offered = async ({ id, get }: Awaited<ReturnType<typeof linkWith>>) =>
      (await get(`/api/view/${id}/packet`)).status;
    expect(await offered(await linkWith({ closed: ['prices'] }))).toBe(200);
    // Neither a narrower nor a wider packet.
    expect(await offered(await linkWith(forSaleScope))).toBe(404);
    expect(await offered(await linkWith({ closed: [] }))).toBe(404);
    const sale = await packetOf(forSaleScope);
    expect(await offered(await linkWith(forSaleScope))).toBe(200);
    // The packet’s own link stays open: it would give a reader more time than this one does.
    const ending = await linkWith(forSaleScope, soon);
    expect(await offered(ending)).toBe(404);
    await write((transaction) => updateViewingLink(sale.own, { revokedAt: new Date().toISOString() }, transaction));
    expect(await offered(ending)).toBe(200);
  });
});
