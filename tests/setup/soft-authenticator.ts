import { createHash, generateKeyPairSync, randomBytes, sign, type KeyObject } from 'node:crypto';
import type { PasskeyQuestion } from '@/lib/form-state';

const sha256 = (data: Buffer | string) => createHash('sha256').update(data).digest();

/** CBOR (RFC 8949 §3) of what an attestation holds: whole numbers, texts, bytes, maps. */
function cbor(value: number | string | Buffer | Map<number | string, unknown>): Buffer {
  const head = (major: number, length: number) => {
    if (length < 24) return Buffer.from([(major << 5) | length]);
    return length < 256
      ? Buffer.from([(major << 5) | 24, length])
      : Buffer.from([(major << 5) | 25, length >> 8, length & 0xff]);
  };
  if (typeof value === 'number') return value < 0 ? head(1, -1 - value) : head(0, value);
  if (typeof value === 'string') return Buffer.concat([head(3, Buffer.byteLength(value)), Buffer.from(value)]);
  if (Buffer.isBuffer(value)) return Buffer.concat([head(2, value.length), value]);
  const members = [...value].flatMap(([name, member]) => [cbor(name), cbor(member as number)]);
  return Buffer.concat([head(5, value.size), ...members]);
}

/** An authenticator and the browser before it, by W3C WebAuthn Level 2 §6.1, §6.5 and §5.8.1, with keys of OpenSSL. */
export class SoftAuthenticator {
  readonly id = randomBytes(16);
  count = 0;
  flags = 0x05;
  private key: KeyObject | undefined;

  constructor(readonly origin: string) {}

  /** Answers a question for a new key. `curve` may be one that is not asked for. */
  create(question: PasskeyQuestion, curve: 'P-256' | 'P-384' = 'P-256'): string {
    if (!('create' in question)) throw new Error('This question asks for a signature.');
    const { privateKey, publicKey } = generateKeyPairSync('ec', { namedCurve: curve });
    this.key = privateKey;
    const { x = '', y = '' } = publicKey.export({ format: 'jwk' });
    // RFC 9053 §7.1.1: kty EC2, alg ES256 or ES384, crv 1 or 2, x, y.
    const [alg, crv] = curve === 'P-256' ? [-7, 1] : [-35, 2];
    const coordinates = [x, y].map((text) => Buffer.from(text, 'base64url'));
    const cose = cbor(new Map<number, unknown>([[1, 2], [3, alg], [-1, crv], [-2, coordinates[0]], [-3, coordinates[1]]])); // prettier-ignore
    const credential = Buffer.concat([Buffer.alloc(16), Buffer.from([0, this.id.length]), this.id, cose]);
    const authData = Buffer.concat([this.authData(question.create.rp.id ?? '', 0x40), credential]);
    const attestationObject = cbor(new Map<string, unknown>([['fmt', 'none'], ['attStmt', new Map()], ['authData', authData]])); // prettier-ignore
    return this.answer({
      clientDataJSON: this.clientData('webauthn.create', question.create.challenge),
      attestationObject: attestationObject.toString('base64url'),
      transports: ['internal', 'something-new'],
    });
  }

  /** Answers a question for a signature. */
  get(question: PasskeyQuestion, change: { type?: string; challenge?: string; rpId?: string } = {}): string {
    if (!('get' in question) || this.key === undefined) throw new Error('There is no key, or none is asked for.');
    this.count += this.count === 0 ? 0 : 1;
    const authData = this.authData(change.rpId ?? question.get.rpId ?? '', 0);
    const clientDataJSON = this.clientData(change.type ?? 'webauthn.get', change.challenge ?? question.get.challenge);
    const signed = Buffer.concat([authData, sha256(Buffer.from(clientDataJSON, 'base64url'))]);
    return this.answer({
      clientDataJSON,
      authenticatorData: authData.toString('base64url'),
      signature: sign('sha256', signed, this.key).toString('base64url'),
      userHandle: '',
    });
  }

  private answer(response: object): string {
    const id = this.id.toString('base64url');
    return JSON.stringify({ id, rawId: id, type: 'public-key', response, clientExtensionResults: { credProps: {} } });
  }
  private clientData(type: string, challenge: string): string {
    return Buffer.from(JSON.stringify({ type, challenge, origin: this.origin, crossOrigin: false })).toString(
      'base64url',
    );
  }
  private authData(rpId: string, more: number): Buffer {
    const counter = Buffer.alloc(4);
    counter.writeUInt32BE(this.count);
    return Buffer.concat([sha256(rpId), Buffer.from([this.flags | more]), counter]);
  }
}
