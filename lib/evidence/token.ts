import { ContentInfo, SignedData, TSTInfo } from 'pkijs';
import { sameBytes, toHex, utf8 } from '@/lib/evidence/bytes';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import { sha256 } from '@/lib/evidence/hash';

const signedDataType = '1.2.840.113549.1.7.2';
const timeStampInfoType = '1.2.840.113549.1.9.16.1.4';
const sha256Algorithm = '2.16.840.1.101.3.4.2.1';
/** Real tokens take 1 to 10 kB. */
const maxTokenBytes = 100_000;

/** What an RFC 3161 token says. Whether its signature holds and who made it is not looked at here. */
export interface TokenContent {
  genTime: string;
  serial: string;
  policy: string;
  imprintAlgorithm: string;
  imprint: Uint8Array;
}

/**
 * Reads an RFC 3161 time-stamp token (DER).
 *
 * @throws EvidenceError `malformed` or `too-large`
 * @example readToken(der).genTime; // '2026-04-18T23:32:07.000Z'
 */
export function readToken(der: Uint8Array): TokenContent {
  if (der.length > maxTokenBytes) throw new EvidenceError('too-large', 'This is larger than any time stamp.');
  try {
    const outer = ContentInfo.fromBER(der.slice());
    if (outer.contentType !== signedDataType) throw new Error('not signed data');
    const { encapContentInfo } = new SignedData({ schema: outer.content as unknown });
    const content = encapContentInfo.eContent?.getValue();
    if (encapContentInfo.eContentType !== timeStampInfoType || content === undefined) throw new Error('no time stamp');
    const info = TSTInfo.fromBER(content);
    return {
      genTime: info.genTime.toISOString(),
      serial: toHex(info.serialNumber.valueBlock.valueHexView),
      policy: info.policy,
      imprintAlgorithm: info.messageImprint.hashAlgorithm.algorithmId,
      imprint: info.messageImprint.hashedMessage.valueBlock.valueHexView.slice(),
    };
  } catch {
    throw new EvidenceError('malformed', 'This is not a time-stamp token (RFC 3161).');
  }
}

/**
 * Whether a token stands on this signed note: SHA-256, and the hash of the note's whole text.
 *
 * @example isTokenOf(readToken(der), note); // true
 */
export function isTokenOf(token: TokenContent, signedNote: string): boolean {
  return token.imprintAlgorithm === sha256Algorithm && sameBytes(token.imprint, sha256(utf8(signedNote)));
}
