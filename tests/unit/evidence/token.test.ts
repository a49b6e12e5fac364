import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { toBase64 } from '@/lib/evidence/bytes';
import { oids } from '@/lib/evidence/oids';
import { checkToken, isTokenOf, readToken } from '@/lib/evidence/token';
import { verifyBundle } from '@/lib/evidence/verify';
import { makeAuthority, makeParty, makeToken, type TokenOptions } from './build-authority';
import { buildRecord, installation, keyOf, signedText, unsignedBundle } from './build-record';

const key = keyOf(installation);
const authority = makeAuthority();
const { root, between, signer } = authority;
const made = (note: string, change: Partial<TokenOptions> = {}) =>
  makeToken(note, { by: signer, carried: [between], ...change });

describe('a token', () => {
  it('says when it was made, under which policy and number, and over what', () => {
    const token = readToken(made('a note\n'));
    expect(token).toMatchObject({
      genTime: '2026-04-18T23:32:07.000Z',
      policy: '1.2.3.4.1',
      serial: '4d',
      nonce: null,
    });
    expect(isTokenOf(token, 'a note\n')).toBe(true);
    expect(isTokenOf(token, 'another note\n')).toBe(false);
    const bySha1 = readToken(made('a note\n', { imprintAlgorithm: '1.3.14.3.2.26' }));
    expect(isTokenOf(bySha1, 'a note\n')).toBe(false);
  });

  it('is not read from anything else', () => {
    expect(() => readToken(new Uint8Array(0))).toThrow(expect.objectContaining({ code: 'malformed' }));
    const other = made('a note\n', { contentType: oids.data });
    expect(() => readToken(other)).toThrow(expect.objectContaining({ code: 'malformed' }));
    expect(() => readToken(new Uint8Array(100_001))).toThrow(expect.objectContaining({ code: 'too-large' }));
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 300 }), (bytes) => {
        expect(() => readToken(bytes)).toThrow(expect.objectContaining({ code: 'malformed' }));
      }),
    );
  });

  it('names the certificate that signed it, as newer and as older authorities do', () => {
    for (const namedBy of ['sha1', 'sha256', 'sha512'] as const) {
      expect(checkToken(made('a note\n', { namedBy })).signer.name).toBe('Quill time stamps');
    }
  });

  const other = makeParty({ name: 'Quill time stamps', issuer: between });
  const bad = (change: Parameters<typeof makeAuthority>[1]) => {
    const party = makeParty({ name: 'Quill time stamps', issuer: between, ...change });
    return () => made('a note\n', { by: party });
  };
  it.each<[string, () => Uint8Array, string]>([
    ['two signers', () => made('a note\n', { signers: [signer, other] }), 'exactly one signer'],
    ['no signer', () => made('a note\n', { signers: [] }), 'exactly one signer'],
    ['another certificate named', () => made('a note\n', { named: other, carried: [other] }), 'two different certificates'],
    ['a certificate named that it lacks', () => made('a note\n', { named: other }), 'is not with it'],
    ['the digest of something else', () => made('a note\n', { messageDigest: new Uint8Array(32) }), 'its digest differs'],
    ['a certificate for something else', bad({ purpose: 'something else' }), 'not for time stamps alone'],
    ['a certificate for something else too', bad({ purpose: 'something else too' }), 'not for time stamps alone'],
    ['a certificate whose purpose is not critical', bad({ purpose: 'not critical' }), 'not for time stamps alone'],
    ['a certificate without a purpose', bad({ purpose: 'none' }), 'not for time stamps alone'],
    ['a key that may not sign', bad({ keyUsage: [4] }), 'not for time stamps alone'],
    ['a certificate that had run out', bad({ until: '2026-04-18T23:32:06Z' }), 'not valid at the time'],
    ['a certificate that did not count yet', bad({ from: '2026-04-18T23:32:08Z' }), 'not valid at the time'],
  ])('with %s is refused', (_, token, sentence) => {
    expect(() => checkToken(token())).toThrow(sentence);
  }); // prettier-ignore

  it('counts in the first and the last second of its certificate', () => {
    const edge = '2026-04-18T23:32:07Z';
    for (const change of [{ from: edge }, { until: edge }]) expect(checkToken(bad(change)()).genTime).toBeDefined();
  });
});

describe('in a record', () => {
  const found = (
    tokensOf: (note: string, seq: number) => Uint8Array[],
    more: Partial<Parameters<typeof verifyBundle>[0]> = {},
  ) => {
    const record = buildRecord();
    const logs = [record.machine.toLog(), record.shelf.toLog()];
    for (const [seq, entry] of (logs[0]?.entries ?? []).entries())
      entry.seal.tokens = tokensOf(entry.seal.checkpoint, seq).map(toBase64);
    return verifyBundle({ bundleText: signedText(unsignedBundle(record, { logs })), key, ...more });
  };
  const onSeq2 =
    (change: Partial<TokenOptions> = {}) =>
    (note: string, seq: number) =>
      seq === 2 ? [made(note, change)] : [];
  const remarks = (finding: ReturnType<typeof found>, code: string) =>
    finding.remarks.filter((remark) => remark.code === code);
  const roots = [root.certificate];

  it('covers its own line and every line before it', () => {
    const finding = found(onSeq2());
    expect(finding.outcome).toBe('unchanged');
    const machine = finding.entries.slice(0, 4);
    expect(machine.map((entry) => entry.earliestStamp?.size ?? null)).toEqual([3, 3, 3, null]);
    expect(machine.map((entry) => entry.stampedBy.length)).toEqual([0, 0, 1, 0]);
    expect(finding.remarks.map(({ code, count }) => [code, count])).toContainEqual(['not-time-stamped', 1]);
  });

  it('proves nothing without a root that the reader brought, although it carries its own', () => {
    const finding = found(onSeq2({ carried: [between, root] }));
    expect(finding.entries.map(({ proven }) => proven)).toEqual(finding.entries.map(() => null));
    expect(finding.entries[2]?.stampedBy).toMatchObject([
      { trust: 'unknown', root: null, signer: 'Quill time stamps' },
    ]);
    expect(remarks(finding, 'authority-unknown')).toMatchObject([{ count: 1 }]);
    expect(finding.notChecked.join()).toContain('--tsa-roots PEM');
  });

  it('proves, by a root that the reader brought, every line that it covers', () => {
    const finding = found(onSeq2(), { roots });
    const genTime = '2026-04-18T23:32:07.000Z';
    expect(finding.entries.slice(0, 4).map(({ proven }) => proven?.genTime ?? null)).toEqual([genTime, genTime, genTime, null]);
    expect(finding.entries[2]?.proven).toMatchObject({ trust: 'independent', root: { name: 'Quill root' } });
    expect(remarks(finding, 'authority-unknown')).toEqual([]);
    expect(finding.notChecked.join()).not.toContain('--tsa-roots');
  }); // prettier-ignore

  it('proves by the earliest independent one, whatever an unknown one says', () => {
    const home = makeAuthority();
    const finding = found(
      (note, seq) => {
        if (seq === 1) return [makeToken(note, { by: home.signer, carried: [home.between, home.root], genTime: '2019-05-01T00:00:00Z' })];
        return seq === 2 ? [made(note, { genTime: '2026-04-19T08:00:00Z' }), made(note)] : [];
      },
      { roots },
    );
    expect(finding.outcome).toBe('unchanged');
    expect(finding.entries[0]?.earliestStamp?.genTime).toBe('2019-05-01T00:00:00.000Z');
    expect(finding.entries[0]?.proven?.genTime).toBe('2026-04-18T23:32:07.000Z');
    expect(remarks(finding, 'authority-unknown')).toMatchObject([{ count: 1 }]);
  }); // prettier-ignore

  it('is never independent from an installation’s own test authority, even by its root', () => {
    const mark = 'Witnessmark test authority (not independent)';
    const ownRoot = makeParty({ name: mark, pathLength: 0 });
    const own = makeParty({ name: 'Stamps', issuer: ownRoot });
    const finding = found((note, seq) => (seq === 2 ? [makeToken(note, { by: own, carried: [ownRoot] })] : []), {
      roots: [ownRoot.certificate],
    });
    expect(finding.entries[2]?.stampedBy).toMatchObject([{ trust: 'own', root: null }]);
    expect(finding.entries[2]?.proven).toBeNull();
    expect(remarks(finding, 'authority-unknown')[0]?.sentence).toContain('own test authority');
  });

  it('is not independent through a certificate that the test authority issued, even if that is brought', () => {
    const ownRoot = makeParty({ name: 'Witnessmark test authority (not independent)', pathLength: 'unlimited' });
    const below = makeParty({ name: 'Quill again', issuer: ownRoot, pathLength: 0 });
    const own = makeParty({ name: 'Stamps', issuer: below });
    const finding = found((note, seq) => (seq === 2 ? [makeToken(note, { by: own, carried: [below] })] : []), {
      roots: [below.certificate],
    });
    expect(finding.entries[2]?.stampedBy).toMatchObject([{ trust: 'own' }]);
  });

  it('is invalid on another line’s seal, as text, unsigned or changed, and beyond sixteen', () => {
    const codes = (tokensOf: (note: string, seq: number) => Uint8Array[]) =>
      found(tokensOf, { roots }).alterations.map(({ code, seq }) => [code, seq]);
    const invalid = [['token-invalid', 2]];
    expect(codes((_, seq) => (seq === 2 ? [made('another note\n')] : []))).toEqual(invalid);
    expect(codes((_, seq) => (seq === 2 ? [new Uint8Array([1])] : []))).toEqual(invalid);
    expect(codes(onSeq2({ signers: [] }))).toEqual(invalid);
    const changed = (note: string) =>
      made(note).map((byte, index, all) => (index === all.length - 1 ? byte ^ 1 : byte));
    expect(codes((note, seq) => (seq === 2 ? [changed(note)] : []))).toEqual(invalid);
    const many = (count: number) =>
      codes((note, seq) => (seq === 2 ? Array.from({ length: count }, () => made(note)) : []));
    expect(many(16)).toEqual([]);
    expect(many(17)).toEqual(invalid);
  });

  it('is unknown, and not altered, when only its chain does not hold', () => {
    const broken = makeParty({ name: 'Quill issuing', issuer: root, pathLength: 0, until: '2020-01-01T00:00:00Z' });
    const late = makeParty({ name: 'Quill time stamps', issuer: broken });
    const finding = found((note, seq) => (seq === 2 ? [makeToken(note, { by: late, carried: [broken] })] : []), {
      roots,
    });
    expect(finding.outcome).toBe('unchanged');
    expect(finding.entries[2]?.stampedBy).toMatchObject([{ trust: 'unknown' }]);
    expect(remarks(finding, 'authority-unknown')[0]?.sentence).toContain('no root that was brought vouches for it');
  });

  it('is invalid when its time has not come where it is checked, with five minutes for the clock', () => {
    const checkedAt = (at: string) => found(onSeq2(), { at }).alterations.map(({ code, seq }) => [code, seq]);
    expect(checkedAt('2026-04-18T23:27:07.000Z')).toEqual([]);
    expect(checkedAt('2026-04-18T23:27:06.999Z')).toEqual([['token-invalid', 2]]);
  });

  it('is remarked on when it is more than five minutes older than what it covers', () => {
    const clockRemarks = (genTime: string) => remarks(found(onSeq2({ genTime })), 'clock-off');
    // Sealed at 23:32:05.120.
    expect(clockRemarks('2026-04-18T23:27:06Z')).toEqual([]);
    expect(clockRemarks('2026-04-18T23:27:05Z')).toMatchObject([{ seq: 2 }]);
  });

  it('says so when lines are proven only more than 72 hours after sealing', () => {
    const late = (genTime: string) => remarks(found(onSeq2({ genTime }), { roots }), 'stamped-late');
    const sealed = found(onSeq2()).entries.slice(0, 3).map(({ sealedAt }) => Date.parse(sealedAt ?? ''));
    const hours = (count: number, beyond: number) => new Date(Math.max(...sealed) + count * 3_600_000 + beyond).toISOString();
    const counts = (genTime: string) => late(genTime).map(({ count }) => count);
    const linesBefore = sealed.filter((time) => time < Math.max(...sealed)).length;
    expect(counts(hours(72, 0))).toEqual([linesBefore]);
    expect(counts(hours(72, 1))).toEqual([3]);
    expect(late('2027-01-01T00:00:00Z')[0]?.sentence).toContain('could have written them anew');
  }); // prettier-ignore

  it('covers nothing from a seal that does not belong to the lines', () => {
    const [record, other] = [buildRecord(), buildRecord()];
    const logs = [record.machine.toLog(), record.shelf.toLog()];
    // A true seal with a true stamp, of another record that somebody once had.
    const foreign = other.machine.seals[2] ?? '';
    const entry = logs[0]?.entries[2];
    if (entry !== undefined) entry.seal = { checkpoint: foreign, tokens: [toBase64(made(foreign))] };
    const finding = verifyBundle({ bundleText: signedText(unsignedBundle(record, { logs })), key, roots });
    expect(finding.outcome).toBe('altered');
    expect(finding.entries.map(({ proven }) => proven)).toEqual(finding.entries.map(() => null));
  });
});
