import { isJsonObject, parseJson } from '@/lib/evidence/canonical';
import { EvidenceError } from '@/lib/evidence/evidence-error';

/** A tuple origin in its ASCII serialisation (RFC 6454 §6.2), as browsers write it. */
const originPattern = /^(https?):\/\/([a-z0-9_](?:[a-z0-9_.-]*[a-z0-9_])?|\[[0-9a-f:]+\])(?::[1-9][0-9]{0,4})?$/;
const numericHost = /^(?:\[.*\]|[0-9.]+)$/;
const loopbackHost = /^(?:localhost|.+\.localhost|127(?:\.[0-9]{1,3}){3}|\[::1\])$/;

/**
 * Reads what a browser noted about a request to sign (W3C WebAuthn Level 2 §5.8.1) and demands that it was this one: an
 * assertion over this challenge, asked for by a page that stood by itself, over TLS or on the same computer.
 *
 * @returns the page's origin, and the names for which its authenticator may have signed: the origin's host, or a
 *   parent domain of it, but never a single label above it
 * @throws EvidenceError `malformed` with what does not fit
 * @example demandClientData(text, challenge).rpIds; // ['records.garage.example', 'garage.example']
 */
export function demandClientData(text: string, challenge: string): { origin: string; rpIds: string[] } {
  const data = parseJson(text);
  if (!isJsonObject(data) || hasNameTwice(text)) throw refused('what its browser noted is not of its form');
  if (data.type !== 'webauthn.get') throw refused('it was not made to approve a request');
  if (data.challenge !== challenge) throw refused('it was made for another statement');
  const isByItself = data.crossOrigin === undefined || data.crossOrigin === false;
  if (!isByItself || data.topOrigin !== undefined) throw refused('it was asked for inside a page of another site');
  const [, scheme, host] = originPattern.exec(typeof data.origin === 'string' ? data.origin : '') ?? [];
  if (host === undefined) throw refused('the site that asked for it is not named in its right form');
  if (scheme === 'http' && !loopbackHost.test(host)) throw refused('it was asked for over plain http');
  return { origin: String(data.origin), rpIds: relyingParties(host) };
}

function relyingParties(host: string): string[] {
  if (numericHost.test(host)) return [host];
  const labels = host.split('.');
  const parents = labels.slice(1, -1).map((_, index) => labels.slice(index + 1).join('.'));
  return [host, ...parents];
}

/** Two readers of JSON may take different ones of two members of the same name, so none may stand there twice. */
function hasNameTwice(json: string): boolean {
  const names = new Set<string>();
  let depth = 0;
  for (const [token, text] of json.matchAll(/"((?:[^"\\]|\\.)*)"(?=\s*:)|"(?:[^"\\]|\\.)*"|[{[\]}]/g)) {
    if (token === '{' || token === '[') depth += 1;
    else if (token === '}' || token === ']') depth -= 1;
    else if (text !== undefined && depth === 1) {
      const name = JSON.parse(token) as string;
      if (names.has(name)) return true;
      names.add(name);
    }
  }
  return false;
}

const refused = (what: string) => new EvidenceError('malformed', `The signature does not hold: ${what}.`);
