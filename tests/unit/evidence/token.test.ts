import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { fromBase64, toBase64 } from '@/lib/evidence/bytes';
import { isTokenOf, readToken } from '@/lib/evidence/token';
import { verifyBundle } from '@/lib/evidence/verify';
import { buildRecord, installation, keyOf, signedText, unsignedBundle } from './build-record';
import { unsignedToken } from './build-token';

const key = keyOf(installation);

it('says when it was made, under which policy and number, and over what', () => {
  const token = readToken(fromBase64(unsignedToken('a note\n')));
  expect(token).toMatchObject({ genTime: '2026-04-18T23:32:07.000Z', policy: '1.2.3.4.1', serial: '4d' });
  expect(isTokenOf(token, 'a note\n')).toBe(true);
  expect(isTokenOf(token, 'another note\n')).toBe(false);
  expect(isTokenOf(readToken(fromBase64(unsignedToken('a note\n', { algorithm: '1.3.14.3.2.26' }))), 'a note\n')).toBe(
    false,
  );
});

it('is not read from anything else', () => {
  expect(() => readToken(new Uint8Array(0))).toThrow(expect.objectContaining({ code: 'malformed' }));
  const other = unsignedToken('a note\n', { contentType: '1.2.840.113549.1.7.1' });
  expect(() => readToken(fromBase64(other))).toThrow(expect.objectContaining({ code: 'malformed' }));
  expect(() => readToken(new Uint8Array(100_001))).toThrow(expect.objectContaining({ code: 'too-large' }));
  fc.assert(
    fc.property(fc.uint8Array({ maxLength: 300 }), (bytes) => {
      expect(() => readToken(bytes)).toThrow(expect.objectContaining({ code: 'malformed' }));
    }),
  );
});

describe('in a record', () => {
  const withTokens = (tokensOf: (note: string, seq: number) => string[]) => {
    const record = buildRecord();
    const logs = [record.machine.toLog(), record.shelf.toLog()];
    for (const [seq, entry] of (logs[0]?.entries ?? []).entries())
      entry.seal.tokens = tokensOf(entry.seal.checkpoint, seq);
    return verifyBundle({ bundleText: signedText(unsignedBundle(record, { logs })), key });
  };

  it('covers its own line and every line before it', () => {
    const finding = withTokens((note, seq) => (seq === 2 ? [unsignedToken(note)] : []));
    expect(finding.outcome).toBe('unchanged');
    const machine = finding.entries.slice(0, 4);
    expect(machine.map((entry) => entry.earliestStamp?.size ?? null)).toEqual([3, 3, 3, null]);
    expect(machine.map((entry) => entry.stampedBy.length)).toEqual([0, 0, 1, 0]);
    expect(finding.remarks.map(({ code, count }) => [code, count])).toContainEqual(['not-time-stamped', 1]);
  });

  it('is not called proof: who made it was not established', () => {
    const finding = withTokens((note, seq) => (seq === 2 ? [unsignedToken(note)] : []));
    expect(finding.remarks.map(({ code }) => code)).toContain('authority-unknown');
    expect(finding.notChecked.join()).toContain('Time-stamp trust not checked');
  });

  it('is invalid on another line’s seal, as text, and beyond sixteen', () => {
    const codes = (tokensOf: (note: string, seq: number) => string[]) =>
      withTokens(tokensOf).alterations.map(({ code, seq }) => [code, seq]);
    expect(codes((_, seq) => (seq === 2 ? [unsignedToken('another note\n')] : []))).toEqual([['token-invalid', 2]]);
    expect(codes((_, seq) => (seq === 2 ? ['!'] : []))).toEqual([['token-invalid', 2]]);
    expect(codes((note, seq) => (seq === 2 ? [toBase64(fromBase64(unsignedToken(note)).slice(1))] : []))).toEqual([
      ['token-invalid', 2],
    ]);
    const many = (count: number) =>
      codes((note, seq) => (seq === 2 ? Array.from({ length: count }, () => unsignedToken(note)) : []));
    expect(many(16)).toEqual([]);
    expect(many(17)).toEqual([['token-invalid', 2]]);
  });

  it('is remarked on when it is more than five minutes older than what it covers', () => {
    const clockRemarks = (genTime: string) =>
      withTokens((note, seq) => (seq === 2 ? [unsignedToken(note, { genTime })] : [])).remarks.filter(
        ({ code }) => code === 'clock-off',
      );
    // Sealed at 23:32:05.120.
    expect(clockRemarks('2026-04-18T23:27:06Z')).toEqual([]);
    expect(clockRemarks('2026-04-18T23:27:05Z')).toMatchObject([{ seq: 2 }]);
  });
});
