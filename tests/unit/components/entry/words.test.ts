import { describe, expect, it } from 'vitest';
import { bytesWords, metricWords, provenWords, stampToComeWords, takenWords } from '@/components/entry/words';
import { ownAuthorityName } from '@/lib/evidence/own-authority';
import type { TokenView } from '@/lib/services/record-view';

const zone = 'America/Denver';
const stamp = (authority: string, genTime: string, change: Partial<TokenView> = {}): TokenView => ({
  authority,
  genTime,
  isOwnAuthority: false,
  isIndependent: false,
  rootName: null,
  sha256: 'aa',
  ...change,
});
const own = stamp('demo.example', '2025-10-20T00:04:11.000Z', { isOwnAuthority: true });

const at = { zone, sealedAt: '2025-10-20T00:00:00.000Z' };

describe('provenWords', () => {
  it('prove by the earliest independent stamp, whatever an earlier one of others says', () => {
    const unknown = stamp('a.example', '2019-05-01T00:00:00.000Z');
    const root = { isIndependent: true, rootName: 'Quill root' };
    const late = stamp('b.example', '2025-10-21T00:05:00.000Z', root);
    const early = stamp('c.example', '2025-10-20T00:05:00.000Z', root);
    expect(provenWords([own, unknown, late, early], at)).toEqual({
      words: '19 Oct 2025 18:05',
      note: 'No later than this, by c.example, under Quill root, which this installation trusts: check it with a root of your own',
      isProven: true,
    });
  });
  it('say how late a stamp is from three days on, as the verifier does', () => {
    const noteAt = (genTime: string) =>
      provenWords([stamp('c.example', genTime, { isIndependent: true, rootName: 'Quill root' })], at).note;
    expect(noteAt('2025-10-22T23:59:59.999Z')).toMatch(/^No later than this, by c.example/);
    expect(noteAt('2025-10-23T00:00:00.000Z')).toMatch(/^No later than this, 3 days after sealing, by c.example/);
  });
  it('call nothing proven by an authority that no root vouches for, nor by the own one', () => {
    const other = stamp('stamps.example', '2025-10-20T00:05:00.000Z');
    expect(provenWords([own, other], at)).toEqual({
      words: 'Not proven',
      note: 'Stamped 19 Oct 2025 18:05 by stamps.example, under no root that this installation trusts: check it with a root of your own',
      isProven: false,
    });
    expect(provenWords([own], at)).toMatchObject({ words: 'Not proven', isProven: false });
    expect(provenWords([own], at).note).toMatch(/own test authority, not independent$/);
    expect(provenWords([], at)).toEqual({
      words: 'Not proven',
      note: 'The time stamp is still to come',
      isProven: false,
    });
  });
  it('name the earliest of several stamps by others', () => {
    const [late, early] = [
      stamp('a.example', '2025-10-21T00:00:00.000Z'),
      stamp('b.example', '2025-10-20T00:00:00.000Z'),
    ];
    expect(provenWords([late, early], at).note).toContain('by b.example');
  });
});

it('stampToComeWords name the authority, and the own one as such', () => {
  expect(stampToComeWords('https://stamps.example/')).toBe('Still to come from https://stamps.example/');
  expect(stampToComeWords(ownAuthorityName)).toBe('Still to come from this installation’s own test authority');
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
