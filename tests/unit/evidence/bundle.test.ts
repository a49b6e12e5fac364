import { describe, expect, it } from 'vitest';
import {
  bundleStatement,
  bundleText,
  demandBundle,
  maxBundleEntries,
  parseBundle,
  signBundle,
} from '@/lib/evidence/bundle';
import { canonicalJson } from '@/lib/evidence/canonical';
import { parseNote, verifyNote } from '@/lib/evidence/checkpoint';
import type { Bundle } from '@/lib/evidence/format';
import { buildRecord, installation, keyOf, listedReceipt, unsignedBundle } from './build-record';

const bundle = signBundle(unsignedBundle(buildRecord()), installation);
const text = bundleText(bundle);

it('is signed over its format, its time and its hash without the signature', () => {
  expect(parseNote(bundle.signature).text).toBe(bundleStatement(bundle));
  expect(bundleStatement(bundle)).toMatch(/^witnessmark\/bundle\/1\n2026-05-01T12:00:00\.000Z\n[A-Za-z0-9+/]{43}=\n$/);
  expect(bundleStatement({ ...bundle, purpose: 'Sale' })).not.toBe(bundleStatement(bundle));
  expect(verifyNote(bundle.signature, keyOf(installation))).toBe(true);
});

it('comes back as it was written', () => {
  expect(parseBundle(text)).toEqual(bundle);
  expect(bundleText(parseBundle(text))).toBe(text);
});

describe('is refused', () => {
  const [log] = bundle.logs;
  const [entry] = log?.entries ?? [];
  const cases: [string, Record<string, unknown>][] = [
    ['with a member more', { note: '' }],
    ['in another format', { format: 'witnessmark/bundle/2' }],
    ['with a time that is no instant', { madeAt: '2026-05-01' }],
    ['with a purpose that is no text', { purpose: 1 }],
    ['with a key that is no text', { verifierKeys: [1] }],
    ['with a certificate that is no hash', { packetCertificate: 'none' }],
    ['without a log', { logs: [] }],
    ['with a log twice', { logs: [log, log] }],
    ['with a log of something else', { logs: [{ ...log, subject: 'shop' }] }],
    ['with an origin that no log has', { logs: [{ ...log, origin: 'witnessmark/bundle' }] }],
    ['with an entry without a seal', { logs: [{ ...log, entries: [{ ...entry, seal: null }] }] }],
    [
      'with a token that is no text',
      { logs: [{ ...log, entries: [{ ...entry, seal: { checkpoint: '', tokens: [1] } }] }] },
    ],
    ['with a file without a name', { files: [{ ...listedReceipt, name: '' }] }],
    ['with two files of one name', { files: [listedReceipt, listedReceipt] }],
    ['with a file of negative length', { files: [{ ...listedReceipt, bytes: -1 }] }],
  ];
  it.each(cases)('%s', (_, change) => {
    const changed = canonicalJson({ ...bundle, ...change });
    expect(() => parseBundle(changed)).toThrow(expect.objectContaining({ code: 'malformed' }));
  });

  it('without one of its members', () => {
    for (const name of Object.keys(bundle)) {
      const rest = Object.fromEntries(Object.entries(bundle).filter(([other]) => other !== name));
      expect(() => parseBundle(canonicalJson(rest)), name).toThrow('not of its form');
    }
  });

  it('in another spelling', () => {
    expect(() => parseBundle(JSON.stringify(bundle, null, 1))).toThrow(
      expect.objectContaining({ code: 'not-canonical' }),
    );
  });

  it('with more entries than could be checked in a reasonable time', () => {
    const withEntries = (count: number): Bundle => {
      const entries = Array.from({ length: count }, () => ({
        leaf: '',
        parts: [],
        seal: { checkpoint: '', tokens: [] },
      }));
      return { ...bundle, logs: [{ id: log?.id ?? '', subject: 'machine', origin: 'a', checkpoint: '', entries }] };
    };
    expect(() => demandBundle(withEntries(maxBundleEntries))).not.toThrow();
    expect(() => demandBundle(withEntries(maxBundleEntries + 1))).toThrow(
      expect.objectContaining({ code: 'too-large' }),
    );
  });
});
