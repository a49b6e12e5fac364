import { beforeAll, describe, expect, it } from 'vitest';
import type { Reference } from '@/lib/evidence/format';
import { sha256Hex } from '@/lib/evidence/hash';
import { verifyBundle } from '@/lib/evidence/verify';
import { author, buildRecord, installation, keyOf, LogBuilder, machineLog, signedText, type TestRecord, unsignedBundle } from './build-record'; // prettier-ignore
import { newDeviceKey, signStatement } from './sign-statement';

const technician = { person: 'c0ffee00-0000-4000-8000-000000000004', name: 'Teodora Lindqvist', role: 'shop' };
const shopKey = newDeviceKey();
const ownKey = newDeviceKey();
const words = {
  capacity: 'inspected',
  statement: 'We looked at the finished work.',
  shop: { name: 'Halyard Cycle Works', accountSince: '2025-01-01T00:00:00.000Z', confirmedBy: null },
  invitedBy: author.person,
};
let minute = 0;
const sealedAt = () => new Date(Date.parse('2026-04-20T08:00:00.000Z') + 60_000 * (minute += 1)).toISOString();

let record: TestRecord;
let machine: LogBuilder;
let service: Reference;
beforeAll(() => {
  record = buildRecord();
});
/** Each test goes on from the same record by itself. */
function goOn(): void {
  machine = record.machine.fork();
  service = record.service;
}
const named = (key: { publicKey: string }, by = technician, log = machine) =>
  log.append({
    kind: 'key',
    sealedAt: sealedAt(),
    parts: { author: by, body: { person: by.person, publicKey: key.publicKey } },
  });
const countersign = (body: Record<string, unknown>, refersTo = service, by = technician) =>
  machine.append({ kind: 'countersignature', sealedAt: sealedAt(), refersTo, parts: { author: by, body } });
const strike = (refersTo: Reference) =>
  machine.append({ kind: 'strike', sealedAt: sealedAt(), refersTo, parts: { author, body: { reason: 'Lost.' } } });
const signed = (key = shopKey, body: Record<string, unknown> = words, refersTo = service) => ({
  ...body,
  signature: signStatement(key, { log: machine.id, refersTo, body }),
});
const signEntry = (refersTo: Reference, key = ownKey, by = author) =>
  machine.append({
    kind: 'signature',
    sealedAt: sealedAt(),
    refersTo,
    parts: { author: by, body: signStatement(key, { log: machine.id, refersTo, body: {} }) },
  });
function verified(opens?: (seq: number, part: string) => boolean) {
  const logs = [machine.toLog(opens), record.shelf.toLog()];
  return verifyBundle({ bundleText: signedText(unsignedBundle(record, { logs })), key: keyOf(installation) });
}
const codesOf = (finding: ReturnType<typeof verifyBundle>) =>
  finding.alterations.map(({ code, seq, technical }) => `${code} at ${seq}: ${technical}`);

describe('a countersignature that the shop signed with its own key', () => {
  it('holds, and says whose key, where it is named, and on which site it was approved', () => {
    goOn();
    const { seq: keySeq } = named(shopKey);
    const { seq } = countersign(signed());
    const finding = verified();
    expect(finding.alterations).toEqual([]);
    expect(finding.entries.find((entry) => entry.seq === seq && entry.log === machineLog)?.deviceSignature).toEqual({
      keyFingerprint: sha256Hex(new Uint8Array(Buffer.from(shopKey.publicKey, 'base64url'))),
      keySeq,
      person: technician.person,
      site: 'https://records.garage.example',
      signs: seq,
    });
  });

  it('carries none when it was made without a key, and nothing is altered', () => {
    goOn();
    const { seq } = countersign(words);
    const finding = verified();
    expect(finding.outcome).toBe('unchanged');
    expect(finding.entries[seq]?.deviceSignature).toBeNull();
  });

  it('is altered when its signature was made for another capacity', () => {
    goOn();
    named(shopKey);
    const { seq } = countersign({ ...signed(), capacity: 'did-the-work' });
    const finding = verified();
    expect(codesOf(finding)).toEqual([
      expect.stringMatching(`^statement-signature-invalid at ${seq}: .*another statement`),
    ]);
    expect(finding.entries[seq]).toMatchObject({ deviceSignature: null, problems: ['statement-signature-invalid'] });
  });

  it('is altered when it says nothing and carries what its signer gave as the signature of an entry', () => {
    goOn();
    named(ownKey, author);
    signEntry(service);
    const signature = signStatement(ownKey, { log: machine.id, refersTo: service, body: {} });
    const { seq } = countersign({ signature }, service, author);
    expect(codesOf(verified())).toEqual([
      expect.stringMatching(`^statement-signature-invalid at ${seq}: .*says nothing`),
    ]);
  });

  it('is altered when it stands for another entry than the one that was signed', () => {
    goOn();
    const key = named(shopKey);
    const { seq } = countersign(signed(), key);
    expect(codesOf(verified())).toEqual([
      expect.stringMatching(`^statement-signature-invalid at ${seq}: .*another statement`),
    ]);
  });

  it('is altered when what stands as its signature is none', () => {
    goOn();
    named(shopKey);
    countersign({ ...words, signature: 'signed' });
    expect(codesOf(verified())).toEqual([expect.stringContaining('four members')]);
  });
});

describe('the key of a statement', () => {
  it('must be named in an earlier entry, not in a later one', () => {
    goOn();
    countersign(signed());
    named(shopKey);
    expect(codesOf(verified())).toEqual([expect.stringContaining('no earlier key entry')]);
  });

  it('must be exactly the one that is named', () => {
    goOn();
    named(newDeviceKey());
    countersign(signed());
    expect(codesOf(verified())).toEqual([expect.stringContaining('no earlier key entry')]);
  });

  it('is not taken from another log of the same file', () => {
    goOn();
    const other = new LogBuilder('6f1c2a34-0000-4000-8000-000000000007', 'machine');
    other.append({
      kind: 'opening',
      sealedAt: '2026-01-01T08:00:00.000Z',
      parts: { author, body: { make: 'Corvane', model: 'Wren 300' } },
    });
    named(shopKey, technician, other);
    countersign(signed());
    const logs = [machine.toLog(), record.shelf.toLog(), other.toLog()];
    const finding = verifyBundle({
      bundleText: signedText(unsignedBundle(record, { logs })),
      key: keyOf(installation),
    });
    expect(codesOf(finding)).toEqual([expect.stringContaining('no earlier key entry')]);
  });

  it('must belong to the person who makes the statement', () => {
    goOn();
    named(ownKey, author);
    countersign(signed(ownKey));
    expect(codesOf(verified())).toEqual([expect.stringContaining('somebody else')]);
  });

  it('vouches for nothing after it was struck, and still for what was signed before', () => {
    goOn();
    const key = named(shopKey);
    const before = countersign(signed());
    strike(key);
    const after = countersign(signed());
    const finding = verified();
    expect(codesOf(finding)).toEqual([expect.stringContaining(`at ${after.seq}: no earlier key entry`)]);
    expect(finding.entries[before.seq]?.deviceSignature).toMatchObject({ keySeq: key.seq });
  });

  it('vouches again when the strike was struck, or when it was named again', () => {
    goOn();
    const key = named(shopKey);
    const undone = strike(key);
    strike(undone);
    const one = countersign(signed());
    strike(key);
    const again = named(shopKey);
    const other = countersign(signed());
    const finding = verified();
    expect(finding.alterations).toEqual([]);
    expect(finding.entries[one.seq]?.deviceSignature).toMatchObject({ keySeq: key.seq });
    expect(finding.entries[other.seq]?.deviceSignature).toMatchObject({ keySeq: again.seq });
  });

  it('cannot be told when its entry is closed: that is said, and nothing is called altered', () => {
    goOn();
    const key = named(shopKey);
    const { seq } = countersign(signed());
    const finding = verified((at, part) => at !== key.seq || part !== 'body');
    expect(finding.outcome).toBe('unchanged');
    expect(finding.notChecked[0]).toContain(`Whose key signed entry ${seq}`);
    expect(finding.entries[seq]?.deviceSignature).toBeNull();
  });

  it('does not save a signature that does not hold, closed or not', () => {
    goOn();
    const key = named(shopKey);
    countersign({ ...signed(), statement: 'We did all of it.' });
    expect(verified((at, part) => at !== key.seq || part !== 'body').outcome).toBe('altered');
  });
});

describe('an entry that its owner signed', () => {
  it('is named by the signature entry that carries the signature', () => {
    goOn();
    named(ownKey, author);
    const { seq } = signEntry(service);
    const finding = verified();
    expect(finding.alterations).toEqual([]);
    expect(finding.entries[seq]?.deviceSignature).toMatchObject({ signs: service.seq, person: author.person });
  });

  it('is altered when the signature was made for another entry', () => {
    goOn();
    named(ownKey, author);
    const body = signStatement(ownKey, { log: machine.id, refersTo: { ...service, seq: 1 }, body: {} });
    machine.append({ kind: 'signature', sealedAt: sealedAt(), refersTo: service, parts: { author, body } });
    expect(codesOf(verified())).toEqual([expect.stringContaining('another statement')]);
  });

  it('is altered when the signature names no entry at all', () => {
    goOn();
    named(ownKey, author);
    const body = signStatement(ownKey, { log: machine.id, refersTo: null, body: {} });
    machine.append({ kind: 'signature', sealedAt: sealedAt(), parts: { author, body } });
    expect(codesOf(verified())).toEqual([
      expect.stringContaining('reference-broken'),
      expect.stringContaining('names no entry'),
    ]);
  });

  it('is not judged where the signature is withheld', () => {
    goOn();
    named(ownKey, author);
    const { seq } = signEntry(service);
    const finding = verified((at) => at !== seq);
    expect(finding.outcome).toBe('unchanged');
    expect(finding.entries[seq]?.deviceSignature).toBeNull();
  });
});
