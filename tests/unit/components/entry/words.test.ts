import { describe, expect, it } from 'vitest';
import { bytesWords, metricWords, provenWords, takenWords } from '@/components/entry/words';
import type { TokenView } from '@/lib/services/record-view';

const zone = 'America/Denver';
const stamp = (authority: string, genTime: string, isOwnAuthority: boolean): TokenView => ({
  authority,
  genTime,
  isOwnAuthority,
  sha256: 'aa',
});

describe('provenWords', () => {
  it('never calls a time proven: another authority’s stamp is the reader’s to check', () => {
    const own = stamp('demo.example', '2025-10-20T00:04:11.000Z', true);
    const other = stamp('stamps.example', '2025-10-20T00:05:00.000Z', false);
    expect(provenWords([own, other], zone)).toEqual({
      words: 'To be checked',
      note: 'Stamped 19 Oct 2025 18:05 by stamps.example: check it against a root you trust',
    });
    expect(provenWords([own], zone).words).toBe('Not proven');
    expect(provenWords([own], zone).note).toContain('not independent');
    expect(provenWords([], zone)).toEqual({ words: 'Not proven', note: 'The time stamp is still to come' });
  });
  it('names the earliest of several stamps by others', () => {
    const late = stamp('a.example', '2025-10-21T00:00:00.000Z', false);
    const early = stamp('b.example', '2025-10-20T00:00:00.000Z', false);
    expect(provenWords([late, early], zone).note).toContain('by b.example');
  });
});

describe('takenWords', () => {
  const photo = {
    sha256: 'aa', bytes: 1, mediaType: 'image/jpeg', role: 'odometer', caption: '', receivedAt: '2025-10-19T21:52:00.000Z',
  } as const; // prettier-ignore
  it('keeps the camera’s word apart from the server’s clock', () => {
    expect(takenWords({ ...photo, takenAt: { local: '2025-10-19T14:35:10', offset: '-06:00' } }, zone)).toBe(
      'Camera’s word: 19 Oct 2025 14:35, UTC-06:00; received 19 Oct 2025 15:52',
    );
    expect(takenWords({ ...photo, takenAt: { local: '2025-10-19T14:35:10' } }, zone)).toContain('zone not known');
    expect(takenWords(photo, zone)).toBe('No time in the file; received 19 Oct 2025 15:52');
  });
});

describe('metricWords', () => {
  it('adds a metric figure to what is not metric', () => {
    // 4.5 × 0.946352946 L (NIST Handbook 44, appendix C: 1 US liquid quart) = 4.2586 L
    expect(metricWords({ amount: '4.5', unit: '[qt_us]' })).toBe('4.26 L');
    expect(metricWords({ amount: '90', unit: 'mL' })).toBeUndefined();
    expect(metricWords({ amount: '2', unit: 'L' })).toBeUndefined();
    expect(metricWords({ amount: '3', unit: '{piece}' })).toBeUndefined();
  });
});

describe('bytesWords', () => {
  it.each([
    [999, '999 bytes'],
    [1000, '1 kB'],
    [1001, '1 kB'],
    [999_499, '999 kB'],
    [999_500, '1.0 MB'],
    [1_000_000, '1.0 MB'],
  ])('says %i bytes as %s', (bytes, words) => expect(bytesWords(bytes)).toBe(words));
});
