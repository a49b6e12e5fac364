import 'server-only';
import type { TimeStampAuthority } from './time-stamp-authority';

const answerWithinMilliseconds = 20_000;
/** A token with a chain of certificates is about 6 kB. */
const mostBytes = 200_000;

/** An authority reached over HTTP (RFC 3161 §3.4). Its name is the address without user name and password. */
export function httpAuthority(address: string): TimeStampAuthority {
  const url = new URL(address);
  const authorization =
    url.username === ''
      ? undefined
      : `Basic ${Buffer.from(`${decodeURIComponent(url.username)}:${decodeURIComponent(url.password)}`).toString('base64')}`;
  url.username = '';
  url.password = '';
  return {
    name: url.href,
    isOwn: false,
    async stamp(request) {
      const response = await fetch(url, {
        method: 'POST',
        headers: {
          'content-type': 'application/timestamp-query',
          accept: 'application/timestamp-reply',
          ...(authorization === undefined ? {} : { authorization }),
        },
        body: new Uint8Array(request),
        redirect: 'error',
        signal: AbortSignal.timeout(answerWithinMilliseconds),
      });
      if (!response.ok)
        throw new Error(`The time-stamp authority ${url.href} answered with status ${response.status}.`);
      const type = response.headers.get('content-type')?.split(';')[0]?.trim();
      if (type !== 'application/timestamp-reply') {
        throw new Error(`The time-stamp authority ${url.href} answered with ${type ?? 'no media type'}.`);
      }
      if (Number(response.headers.get('content-length') ?? 0) > mostBytes) throw tooLong(url);
      const reply = new Uint8Array(await response.arrayBuffer());
      if (reply.length > mostBytes) throw tooLong(url);
      return reply;
    },
  };
}

function tooLong(url: URL): Error {
  return new Error(`The time-stamp authority ${url.href} answered with more than ${mostBytes} bytes.`);
}
