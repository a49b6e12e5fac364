import { createHash, generateKeyPairSync, type KeyObject, sign } from 'node:crypto';
import type { StatementSignature } from '@/lib/evidence/format';
import { type Statement, statementChallenge } from '@/lib/evidence/statement';

/** A P-256 key as an authenticator holds one, made and used by OpenSSL through node:crypto. */
export interface DeviceKey {
  privateKey: KeyObject;
  /** SPKI in DER, base64url. */
  publicKey: string;
}

export function newDeviceKey(): DeviceKey {
  const { privateKey, publicKey } = generateKeyPairSync('ec', { namedCurve: 'P-256' });
  return { privateKey, publicKey: publicKey.export({ type: 'spki', format: 'der' }).toString('base64url') };
}

/** What a forger may change; by default everything is as a browser and an authenticator make it. */
export interface Forgery {
  type?: string;
  challenge?: string;
  origin?: unknown;
  crossOrigin?: unknown;
  /** Stands after the members that browsers write. */
  moreClientData?: string;
  rpId?: string;
  /** W3C WebAuthn Level 2 §6.1: bit 0 user present, bit 2 user verified. */
  flags?: number;
  moreAuthenticatorData?: Buffer;
  signed?: (data: Buffer) => Buffer;
}

/** Client data and authenticator data by hand, W3C WebAuthn Level 2 §5.8.1 and §6.1; the signature as of §6.5.6. */
export function signStatement(key: DeviceKey, statement: Statement, forgery: Forgery = {}): StatementSignature {
  const challenge = forgery.challenge ?? Buffer.from(statementChallenge(statement)).toString('base64url');
  const { type = 'webauthn.get', origin = 'https://records.garage.example', crossOrigin = false } = forgery;
  const members = { type, challenge, origin, ...(crossOrigin === undefined ? {} : { crossOrigin }) };
  const clientData = Buffer.from(JSON.stringify(members).slice(0, -1) + (forgery.moreClientData ?? '') + '}');
  const authenticatorData = Buffer.concat([
    createHash('sha256')
      .update(forgery.rpId ?? 'records.garage.example')
      .digest(),
    Buffer.from([forgery.flags ?? 0x05]),
    Buffer.from([0, 0, 0, 7]),
    forgery.moreAuthenticatorData ?? Buffer.alloc(0),
  ]);
  const data = Buffer.concat([authenticatorData, createHash('sha256').update(clientData).digest()]);
  return {
    publicKey: key.publicKey,
    authenticatorData: authenticatorData.toString('base64url'),
    clientDataJSON: clientData.toString('base64url'),
    signature: (forgery.signed?.(data) ?? sign('sha256', data, key.privateKey)).toString('base64url'),
  };
}

/** ECDSA-Sig-Value (RFC 3279 §2.2.3) of two whole numbers, with no more bytes than they need. */
export function derSignature(r: bigint, s: bigint): Buffer {
  const [one, other] = [derInteger(r), derInteger(s)];
  return Buffer.concat([Buffer.from([0x30, one.length + other.length]), one, other]);
}
function derInteger(value: bigint): Buffer {
  const hex = value.toString(16);
  const bytes = Buffer.from(hex.length % 2 === 0 ? hex : `0${hex}`, 'hex');
  const body = (bytes[0] ?? 0) >= 0x80 ? Buffer.concat([Buffer.from([0]), bytes]) : bytes;
  return Buffer.concat([Buffer.from([0x02, body.length]), body]);
}
/** r and s of a DER signature. */
export function numbersOf(der: Buffer): [bigint, bigint] {
  const rLength = der[3] ?? 0;
  const hex = (from: number, length: number) => BigInt(`0x${der.subarray(from, from + length).toString('hex')}`);
  return [hex(4, rLength), hex(6 + rLength, der[5 + rLength] ?? 0)];
}
