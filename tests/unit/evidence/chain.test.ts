import { describe, expect, it } from 'vitest';
import { readCertificate } from '@/lib/evidence/certificate';
import { ChainBuilder } from '@/lib/evidence/chain';
import { oids } from '@/lib/evidence/oids';
import { makeParty, type Party } from './build-authority';

const at = Date.parse('2026-04-18T23:32:07Z');
function chain(signer: Party, { carried = [] as Party[], roots = [] as Party[], when = at } = {}): (string | null)[] | null {
  const read = ({ certificate }: Party) => readCertificate(certificate);
  const given = { signer: read(signer), carried: carried.map(read), roots: roots.map(read), at: when };
  const found = new ChainBuilder().build({ ...given, purpose: oids.timeStamping });
  return found && found.map(({ name }) => name);
} // prettier-ignore

const root = makeParty({ name: 'Root', pathLength: 'unlimited' });
const between = makeParty({ name: 'Between', issuer: root, pathLength: 0 });
const signer = makeParty({ name: 'Signer', issuer: between });

describe('a chain', () => {
  it('leads from the signer over what is carried to a root that was given', () => {
    expect(chain(signer, { carried: [between], roots: [root] })).toEqual(['Signer', 'Between', 'Root']);
    expect(chain(makeParty({ name: 'Straight', issuer: root }), { roots: [root] })).toEqual(['Straight', 'Root']);
  });

  it('ends where the reader says, at a certificate between or at the signer itself', () => {
    expect(chain(signer, { roots: [between] })).toEqual(['Signer', 'Between']);
    expect(chain(signer, { roots: [signer] })).toEqual(['Signer']);
  });

  it('never ends in a certificate that was only carried', () => {
    expect(chain(signer, { carried: [between, root] })).toBeNull();
    expect(chain(signer, { carried: [between, root], roots: [makeParty({ name: 'Root', pathLength: 'unlimited' })] })).toBeNull();
  }); // prettier-ignore

  it('needs every certificate between', () => {
    expect(chain(signer, { roots: [root] })).toBeNull();
  });

  const rsaRoot = makeParty({ name: 'RSA root', kind: 'rsa', pathLength: 'unlimited' });
  it.each([
    ['P-384', makeParty({ name: 'P-384 root', kind: 'P-384', pathLength: 1 })],
    ['P-521', makeParty({ name: 'P-521 root', kind: 'P-521', pathLength: 1 })],
    ['RSA', rsaRoot],
  ])('holds with a root on %s', (_, other) => {
    const below = makeParty({ name: 'Below', issuer: other, pathLength: 0 });
    expect(chain(makeParty({ name: 'Signer', issuer: below }), { carried: [below], roots: [other] })).toHaveLength(3);
  });

  it('is found although a certificate of the same name comes first', () => {
    const twin = makeParty({ name: 'Between', issuer: root, pathLength: 0 });
    expect(chain(signer, { carried: [twin, between], roots: [root] })).toEqual(['Signer', 'Between', 'Root']);
  });

  it.each<[string, Parameters<typeof makeParty>[0]]>([
    ['may not issue', { name: 'Between', issuer: root, keyUsage: [5] }],
    ['may not sign certificates', { name: 'Between', issuer: root, pathLength: 0, keyUsage: [0] }],
    ['had run out', { name: 'Between', issuer: root, pathLength: 0, until: '2026-04-18T23:32:06Z' }],
    ['did not count yet', { name: 'Between', issuer: root, pathLength: 0, from: '2026-04-18T23:32:08Z' }],
    ['demands what is not understood', { name: 'Between', issuer: root, pathLength: 0, strange: 'critical' }],
    ['is for something else', { name: 'Between', issuer: root, pathLength: 0, purpose: 'something else' }],
  ])('does not hold if the certificate between %s', (_, options) => {
    const wrong = makeParty(options);
    expect(chain(makeParty({ name: 'Signer', issuer: wrong }), { carried: [wrong], roots: [root] })).toBeNull();
  });

  it('does not mind an extension that is unknown but not critical', () => {
    const harmless = makeParty({ name: 'Between', issuer: root, pathLength: 0, strange: 'harmless' });
    expect(chain(makeParty({ name: 'Signer', issuer: harmless }), { carried: [harmless], roots: [root] })).toHaveLength(3);
    expect(chain(makeParty({ name: 'Signer', issuer: root, strange: 'critical' }), { roots: [root] })).toBeNull();
  }); // prettier-ignore

  it('is no longer than its certificates allow', () => {
    const second = makeParty({ name: 'Second', issuer: between, pathLength: 0 });
    const below = makeParty({ name: 'Signer', issuer: second });
    expect(chain(below, { carried: [second, between], roots: [root] })).toBeNull();
    const tight = makeParty({ name: 'Tight', pathLength: 0 });
    const under = makeParty({ name: 'Under', issuer: tight, pathLength: 0 });
    expect(chain(makeParty({ name: 'Signer', issuer: under }), { carried: [under], roots: [tight] })).toBeNull();
    expect(chain(makeParty({ name: 'Signer', issuer: tight }), { roots: [tight] })).toHaveLength(2);
  });

  it('asks whether the root counted at the time, too', () => {
    const old = makeParty({ name: 'Old', pathLength: 0, until: '2020-01-01T00:00:00Z' });
    const below = makeParty({ name: 'Signer', issuer: old });
    expect(chain(below, { roots: [old] })).toBeNull();
    expect(chain(below, { roots: [old], when: Date.parse('2019-12-31T00:00:00Z') })).toHaveLength(2);
  });

  it('costs little, however many certificates of one name are carried', () => {
    const twins = Array.from({ length: 16 }, () => makeParty({ name: 'Loop', issuer: undefined, pathLength: 'unlimited' }));
    const first = twins[0];
    const lost = makeParty({ name: 'Signer', issuer: first });
    const before = performance.now();
    expect(chain(lost, { carried: twins, roots: [root] })).toBeNull();
    // Not a measurement: without its bounds this would take for ever.
    expect(performance.now() - before).toBeLessThan(5_000);
  }); // prettier-ignore
});
