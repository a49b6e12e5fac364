import { describe, expect, it } from 'vitest';
import { ownSignatureCells, ownSignatureSentence } from '@/lib/packet/pages/own-signature';
import type { EntryView } from '@/lib/services/record-view';
import { newDeviceKey } from '../evidence/sign-statement';

// The words of the packet; no source but the project's own.
const signature = {
  keyFingerprint: 'ab'.repeat(32),
  keySeq: 4,
  person: 'c0ffee00-0000-4000-8000-000000000004',
  site: 'https://records.garage.example',
  signs: 2,
};

describe('a signature made outside the server, on paper', () => {
  it('names the site and the entry of the key, and what it does not show', () => {
    const words = ownSignatureSentence({ result: 'holds', signature });
    expect(words).toContain('Signed with the signer’s own key, outside this server');
    expect(words).toContain('approved on https://records.garage.example with the key that entry 4 names');
    expect(words).toContain('It shows that the key’s holder approved this request, not what their screen showed.');
  });

  it('is never claimed where there is none, where it fails, or where its key is closed', () => {
    expect(ownSignatureSentence(undefined)).toBe('No signature was made outside this server.');
    expect(ownSignatureSentence({ result: 'fails', reason: 'it was made for another statement' })).toContain(
      'does not hold',
    );
    expect(ownSignatureSentence({ result: 'not-checked', site: signature.site })).toContain('cannot be checked here');
  });

  it('is a gap in its own entry when it fails', () => {
    const entry = {
      kind: 'signature',
      body: {},
      ownSignature: { result: 'fails', reason: 'x' },
    } as unknown as EntryView;
    expect(ownSignatureCells(entry)).toMatchObject([{ isGap: true }]);
  });

  it('has its key printed by fingerprint, and no name that is withheld', () => {
    const { publicKey } = newDeviceKey();
    const entry = { kind: 'key', body: { person: signature.person, publicKey }, author: null } as unknown as EntryView;
    const cells = ownSignatureCells(entry);
    expect(cells[0]).toMatchObject({ value: 'name withheld' });
    expect(cells[1]?.value).toMatch(/^[0-9a-f ]{64,}$/);
  });
});
