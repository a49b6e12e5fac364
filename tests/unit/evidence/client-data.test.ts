import { describe, expect, it } from 'vitest';
import { demandClientData } from '@/lib/evidence/client-data';

// W3C WebAuthn Level 2 §5.8.1 (what a browser notes), §7.2 steps 11 to 15 (what of it is checked), §5.1.3 (which RP IDs
// a page may name). That a parent must have two labels stands in for the public suffix list: no source, own rule.
const challenge = 'q5Fdt5HYwI0Wm8dLgNo-YK0RRoGfDb1nbp9GRH7xRHY';
const noted = (change: Record<string, unknown> = {}) =>
  JSON.stringify({
    type: 'webauthn.get',
    challenge,
    origin: 'https://records.garage.example',
    crossOrigin: false,
    ...change,
  });
const idsAt = (origin: string) => demandClientData(noted({ origin }), challenge).rpIds;

describe('what a browser notes about a request to sign', () => {
  it('is read as the specification prints it, extra members and all', () => {
    const text = noted({ other_keys_can_be_added_here: 'do not compare clientDataJSON against a template' });
    expect(demandClientData(text, challenge)).toEqual({
      origin: 'https://records.garage.example',
      rpIds: ['records.garage.example', 'garage.example'],
    });
  });

  it('may leave out crossOrigin, as older browsers do, and escape slashes', () => {
    const text = noted({ crossOrigin: undefined }).replaceAll('/', '\\/');
    expect(demandClientData(text, challenge).origin).toBe('https://records.garage.example');
  });

  it.each([
    ['another type', { type: 'webauthn.create' }],
    ['no type', { type: undefined }],
    ['another challenge', { challenge: 'AAAA' }],
    ['a page in a frame of another site', { crossOrigin: true }],
    ['crossOrigin that is no flag', { crossOrigin: 'true' }],
    ['a frame around it', { topOrigin: 'https://elsewhere.example' }],
    ['no origin', { origin: undefined }],
    ['an origin with a path', { origin: 'https://records.garage.example/' }],
    ['an origin in capitals', { origin: 'https://Records.garage.example' }],
    ['an app for an origin', { origin: 'android:apk-key-hash:AAAA' }],
    ['plain http', { origin: 'http://records.garage.example' }],
    ['plain http on a host that only begins like localhost', { origin: 'http://localhost.garage.example' }],
  ])('is refused with %s', (_, change) => {
    expect(() => demandClientData(noted(change), challenge)).toThrow(/does not hold/);
  });

  it.each(['', 'null', '[]', '"webauthn.get"', noted().slice(0, -1), `\uFEFF${noted()}`])(
    'is refused when it is no JSON object: %j',
    (text) => expect(() => demandClientData(text, challenge)).toThrow(),
  );

  it('is refused with a member that stands there twice, however it is spelt', () => {
    const twice = (spelling: string) => noted().replace('}', `,"${spelling}":"https://elsewhere.example"}`);
    expect(() => demandClientData(twice('origin'), challenge)).toThrow(/not of its form/);
    expect(() => demandClientData(twice('ori\\u0067in'), challenge)).toThrow(/not of its form/);
    expect(demandClientData(noted({ more: { a: { origin: 1 }, origin: 2 } }), challenge).origin).toBeDefined();
  });
});

describe('the names an authenticator may have signed for', () => {
  it.each([
    ['https://records.garage.example:8443', ['records.garage.example', 'garage.example']],
    ['https://garage.example', ['garage.example']],
    ['https://intranet', ['intranet']],
    ['http://localhost:3000', ['localhost']],
    ['http://app.localhost', ['app.localhost']],
    ['http://127.0.0.1:3000', ['127.0.0.1']],
    ['http://[::1]:3000', ['[::1]']],
    ['https://a.b.c.example', ['a.b.c.example', 'b.c.example', 'c.example']],
  ])('of %s are %j', (origin, ids) => expect(idsAt(origin)).toEqual(ids));
});
