import * as asn1js from 'asn1js';
import { AlgorithmIdentifier, ContentInfo, EncapsulatedContentInfo, MessageImprint, SignedData, TSTInfo } from 'pkijs';
import { toBase64, utf8 } from '@/lib/evidence/bytes';
import { sha256 } from '@/lib/evidence/hash';

/** A time-stamp token that nobody signed: enough to test how its content is read. */
export function unsignedToken(
  note: string,
  {
    genTime = '2026-04-18T23:32:07Z',
    algorithm = '2.16.840.1.101.3.4.2.1',
    contentType = '1.2.840.113549.1.9.16.1.4',
  } = {},
): string {
  const info = new TSTInfo({
    version: 1,
    policy: '1.2.3.4.1',
    messageImprint: new MessageImprint({
      hashAlgorithm: new AlgorithmIdentifier({ algorithmId: algorithm }),
      hashedMessage: new asn1js.OctetString({ valueHex: sha256(utf8(note)).slice().buffer }),
    }),
    serialNumber: new asn1js.Integer({ value: 77 }),
    genTime: new Date(genTime),
  });
  const signed = new SignedData({
    version: 3,
    encapContentInfo: new EncapsulatedContentInfo({
      eContentType: contentType,
      eContent: new asn1js.OctetString({ valueHex: info.toSchema().toBER(false) }),
    }),
  });
  const outer = new ContentInfo({ contentType: '1.2.840.113549.1.7.2', content: signed.toSchema(true) as unknown });
  return toBase64(new Uint8Array(outer.toSchema().toBER(false)));
}
