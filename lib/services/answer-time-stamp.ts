import 'server-only';
import { WitnessmarkError } from '@/lib/errors';
import { answerRequest } from '@/lib/ports/time-stamp-authority/own';
import { ownCertificates } from '@/lib/ports/time-stamp-authority/own-certificates';
import { readBody } from '@/lib/services/read-body';

/** A request for one digest takes less than 100 bytes. */
const mostBytes = 4096;

/** The own test authority's answer to an HTTP request (RFC 3161 §3.4): DER of a reply, a refusing one included. */
export async function answerTimeStamp(request: Request): Promise<Uint8Array<ArrayBuffer>> {
  const type = request.headers.get('content-type')?.split(';')[0]?.trim().toLowerCase();
  if (type !== 'application/timestamp-query') {
    throw new WitnessmarkError('unsupported-file', 'Send a time-stamp request as application/timestamp-query.');
  }
  return new Uint8Array(answerRequest(await readBody(request, mostBytes)));
}

/** PEM of the root by which the own test authority's stamps are checked. It makes them no more independent. */
export const timeStampRoot = (): string => ownCertificates().root.toString();
