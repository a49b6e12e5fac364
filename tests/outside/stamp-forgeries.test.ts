import { spawnSync } from 'node:child_process';
import { afterAll, describe, expect, it } from 'vitest';
import { toBase64 } from '@/lib/evidence/bytes';
import type { Finding } from '@/lib/evidence/finding';
import { makeAuthority, makeParty, makeToken, type Party } from '../unit/evidence/build-authority';
import { buildRecord, installation, keyOf, signedText, unsignedBundle } from '../unit/evidence/build-record';
import { makeOpensslAuthority, Openssl, opensslToken, pemOf } from './openssl-authority';

// Each lie about time before two judges that share no code: the project's own command, and the verifier in Python, which
// has openssl look at every token. Both must call the same records altered and the same times proven.
const openssl = new Openssl();
afterAll(() => openssl.remove());
const key = keyOf(installation);

/** A record in whose machine log the seals carry these tokens; the installation signs whatever it is made to. */
function recordWith(tokensOf: (note: string, seq: number) => Uint8Array[]): string {
  const record = buildRecord();
  const logs = [record.machine.toLog(), record.shelf.toLog()];
  for (const [seq, { seal }] of (logs[0]?.entries ?? []).entries())
    seal.tokens = tokensOf(seal.checkpoint, seq).map(toBase64);
  return signedText(unsignedBundle(record, { logs }));
}

interface Verdict {
  outcome: string;
  /** Proven times of the machine's entries. */
  proven: (string | null)[];
}

/** What both say; they must say the same. */
function judge(text: string, roots: Party[] = []): Verdict & { finding: Finding } {
  const file = openssl.write('record.json', text);
  const given = roots.length === 0 ? [] : ['--tsa-roots', openssl.write('roots.pem', roots.map(({ certificate }) => pemOf(certificate)).join(''))];
  const own = spawnSync('node', ['scripts/verify.mjs', file, '--key', key, '--json', ...given], { encoding: 'utf8', maxBuffer: 1e8 });
  const finding = JSON.parse(own.stdout) as Finding;
  const log = finding.logs[0]?.id;
  const ours = finding.entries.filter((entry) => entry.log === log).map(({ proven }) => proven?.genTime ?? null);
  const other = spawnSync('python3', ['tests/outside/independent_verifier.py', file, ...given], { encoding: 'utf8' });
  const theirs = [...other.stdout.matchAll(/^proven (\S+) \d+ (\S+)$/gm)].filter(([, id]) => id === log).map(([, , time]) => (time === '-' ? null : time));
  expect({ status: other.status, proven: roots.length === 0 ? ours.map(() => null) : theirs }, other.stdout).toEqual({ status: own.status, proven: ours });
  return { outcome: finding.outcome, proven: ours, finding };
} // prettier-ignore

const codes = ({ finding }: { finding: Finding }) => finding.remarks.map(({ code }) => code);
const problems = ({ finding }: { finding: Finding }) => finding.alterations.map(({ code, seq }) => [code, seq]);
const honest = makeAuthority();
const stamp = (note: string, { root, between, signer }: ReturnType<typeof makeAuthority>, genTime: string) =>
  makeToken(note, { by: signer, carried: [between, root], genTime });
const onLast = (token: (note: string) => Uint8Array) => recordWith((note, seq) => (seq === 3 ? [token(note)] : []));
const nothing = [null, null, null, null];

describe('a true stamp', () => {
  const genTime = '2026-04-19T00:00:00Z';
  const text = onLast((note) => stamp(note, honest, genTime));

  it('proves every entry before it, by the root that the reader brought', () => {
    const found = judge(text, [honest.root]);
    expect(found).toMatchObject({ outcome: 'unchanged', proven: nothing.map(() => '2026-04-19T00:00:00.000Z') });
    expect(codes(found)).not.toContain('authority-unknown');
  });

  it('proves nothing without a root, nor by somebody else’s', () => {
    for (const roots of [[], [makeAuthority().root]]) {
      const found = judge(text, roots);
      expect(found).toMatchObject({ outcome: 'unchanged', proven: nothing });
      expect(codes(found)).toContain('authority-unknown');
    }
  });

  it('of openssl’s own making proves as well', () => {
    const { root } = makeOpensslAuthority(openssl, 'P-384');
    const found = judge(
      recordWith((note, seq) => (seq === 1 ? [opensslToken(openssl, note)] : [])),
      [{ ...honest.root, certificate: root }],
    );
    expect(found.outcome).toBe('unchanged');
    expect(found.proven.map((time) => time !== null)).toEqual([true, true, false, false]);
  });
});

describe('an authority made at home, dated 2019', () => {
  const home = makeAuthority();
  const text = onLast((note) => stamp(note, home, '2019-05-01T08:00:00Z'));

  it('proves nothing, although it carries its own root', () => {
    const found = judge(text, [honest.root]);
    expect(found).toMatchObject({ outcome: 'unchanged', proven: nothing });
    // What it claims is shown as what it is: a time before the entry says it was sealed.
    expect(codes(found)).toEqual(expect.arrayContaining(['authority-unknown', 'clock-off']));
  });

  it('is believed by whoever brings its root: that is the reader’s choice', () => {
    const found = judge(text, [home.root]);
    expect(found.proven).toEqual(nothing.map(() => '2019-05-01T08:00:00.000Z'));
    expect(codes(found)).toContain('clock-off');
  });

  it('is never independent under the mark of an installation’s own test authority', () => {
    const root = makeParty({ name: 'Witnessmark test authority (not independent)', pathLength: 0 });
    const signer = makeParty({ name: 'Quill time stamps', issuer: root });
    const own = onLast((note) => makeToken(note, { by: signer, carried: [root], genTime: '2026-04-19T00:00:00Z' }));
    const found = judge(own, [root, honest.root]);
    expect(found).toMatchObject({ outcome: 'unchanged', proven: nothing });
    expect(found.finding.remarks.find(({ code }) => code === 'authority-unknown')?.sentence).toContain(
      'own test authority',
    );
  });
});

describe('a stamp that lies', () => {
  it('about the future is invalid where it is checked', () => {
    const ahead = new Date(Date.now() + 3_600_000).toISOString();
    const found = judge(
      onLast((note) => stamp(note, honest, ahead)),
      [honest.root],
    );
    expect(found).toMatchObject({ outcome: 'altered', proven: nothing });
    expect(problems(found)).toEqual([['token-invalid', 3]]);
  });

  const { signer, between, root } = honest;
  const genTime = '2026-04-19T00:00:00Z';
  const stranger = makeParty({ name: 'Quill time stamps', issuer: between });
  const changed = (token: Uint8Array) =>
    Uint8Array.from(token, (byte, place) => (place === token.length - 1 ? byte ^ 1 : byte));
  const by = (change: Partial<Parameters<typeof makeParty>[0]>) => (note: string) =>
    makeToken(note, {
      by: makeParty({ name: 'Quill time stamps', issuer: between, ...change }),
      carried: [between, root],
      genTime,
    });
  it.each<[string, (note: string) => Uint8Array]>([
    ['was made for something else', () => makeToken('another note\n', { by: signer, carried: [between, root], genTime })],
    ['has a changed signature', (note) => changed(makeToken(note, { by: signer, carried: [between, root], genTime }))],
    ['has two signers', (note) => makeToken(note, { by: signer, carried: [between, root], signers: [signer, stranger], genTime })],
    ['names another certificate', (note) => makeToken(note, { by: signer, carried: [between, root, stranger], named: stranger, genTime })],
    ['is by a certificate that had run out', by({ until: '2026-04-18T00:00:00Z' })],
    ['is by a certificate of later', by({ from: '2026-04-20T00:00:00Z' })],
    ['is by a certificate for something else', by({ purpose: 'something else' })],
    ['is by a certificate whose purpose is not critical', by({ purpose: 'not critical' })],
  ])('is invalid: it %s', (_, token) => {
    const found = judge(onLast(token), [root]);
    expect(found).toMatchObject({ outcome: 'altered', proven: nothing });
    expect(problems(found)).toEqual([['token-invalid', 3]]);
  }); // prettier-ignore

  it('only about its chain is unknown, and alters nothing', () => {
    const wrong = makeParty({ name: 'Quill issuing', issuer: root, pathLength: 0, keyUsage: [0] });
    const below = makeParty({ name: 'Quill time stamps', issuer: wrong });
    const found = judge(
      onLast((note) => makeToken(note, { by: below, carried: [wrong], genTime })),
      [root],
    );
    expect(found).toMatchObject({ outcome: 'unchanged', proven: nothing });
    expect(codes(found)).toContain('authority-unknown');
  });
});

it('a rewrite that is stamped when it is made is proven only for that late time, and called late', () => {
  // Everything was written anew in one night, long after it says it was sealed, under true stamps of an honest authority.
  const [night, sealed] = [new Date(Date.now() - 60_000), Date.parse('2026-04-18T23:32:05.120Z')];
  night.setMilliseconds(0);
  expect(night.getTime() - sealed, 'this test needs a clock that is right').toBeGreaterThan(72 * 3_600_000);
  const found = judge(
    recordWith((note) => [stamp(note, honest, night.toISOString())]),
    [honest.root],
  );
  expect(found).toMatchObject({ outcome: 'unchanged', proven: nothing.map(() => night.toISOString()) });
  expect(found.finding.remarks.find(({ code }) => code === 'stamped-late')).toMatchObject({ count: 4 });
});
