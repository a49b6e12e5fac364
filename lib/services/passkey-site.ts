import 'server-only';
import { env } from '@/lib/env';

export interface PasskeySite {
  /** The name for which keys are made: the host people reach this installation by. */
  rpId: string;
  origin: string;
  /** Why no key can be added or used at this address; null if it can. */
  refusal: string | null;
}

/** Where keys of this installation are made and used. Browsers offer them over TLS or on localhost only. */
export function passkeySite(address = env.url): PasskeySite {
  const { origin, hostname, protocol } = new URL(address);
  const isLocal = hostname === 'localhost' || hostname.endsWith('.localhost');
  const isNumber = /^(?:\[.*\]|[0-9.]+)$/.test(hostname);
  return { rpId: hostname, origin, refusal: refusalOf() };

  function refusalOf(): string | null {
    if (isNumber) {
      return `Browsers make keys for names only, and this installation is reached at ${origin}, a number. It needs a name and TLS (https), or localhost.`;
    }
    if (protocol === 'https:' || isLocal) return null;
    return `Browsers make keys over TLS (https) or on localhost only, and this installation is reached at ${origin}. Whoever runs it finds a way to TLS in its README.`;
  }
}
