import type { NextRequest } from 'next/server';
import { plainPage } from '@/components/reader/plain-page';
import { keepReading, type ReaderCookie } from '@/lib/auth/reader-cookie';
import { asRefusal } from '@/lib/auth/refusal';
import { countAttempt, forgiveAttempts, secretAddressLimits } from '@/lib/auth/throttle';
import { visitorAddress } from '@/lib/auth/visitor';
import type { WitnessmarkError } from '@/lib/errors';

/**
 * Swaps a secret address for a cookie and leads to an address without the secret, so that the secret stands in no
 * history, no Referer and no bookmark. Guesses are counted before they are answered.
 */
export async function swapAddress(
  request: NextRequest,
  kind: keyof ReaderCookie,
  open: () => Promise<{ id: string; path: string }>,
): Promise<Response> {
  try {
    const limits = secretAddressLimits(await visitorAddress());
    await countAttempt(limits);
    const { id, path } = await open();
    await forgiveAttempts(limits);
    await keepReading(kind, id);
    return new Response(null, {
      status: 303,
      headers: {
        location: path,
        'cache-control': 'private, no-store',
        'referrer-policy': 'no-referrer',
        'x-robots-tag': 'noindex',
      },
    });
  } catch (error) {
    return refusalPage(asRefusal(error), request);
  }
}

const titles: Partial<Record<WitnessmarkError['code'], string>> = {
  gone: 'This address has ended',
  'not-found': 'This address opens nothing',
  'too-many-attempts': 'Too many tries from here',
};

/** A refusal as a page, for somebody who followed an address and has no account. */
export function refusalPage(refusal: WitnessmarkError, request: Request): Response {
  const isUnknown = refusal.code === 'not-found';
  return plainPage({
    status: refusal.status,
    title: titles[refusal.code] ?? 'This page could not be shown',
    sentences: isUnknown
      ? [
          'There is no such viewing link or invitation, or this browser did not come by its whole address.',
          'Open the address you were sent once more, complete to its last letter. If it still opens nothing, ask whoever sent it for a new one.',
        ]
      : [refusal.message, 'A packet that you saved stays valid: it can be checked without this address.'],
    nonce: request.headers.get('x-nonce') ?? undefined,
  });
}
