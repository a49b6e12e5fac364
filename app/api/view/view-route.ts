import type { NextRequest } from 'next/server';
import { z } from 'zod';
import { refusalPage } from '@/app/v/swap-address';
import { isReading } from '@/lib/auth/reader-cookie';
import { route } from '@/lib/auth/route';
import { WitnessmarkError, notFound } from '@/lib/errors';
import { readViewingLink } from '@/lib/services/open-viewing-link';

type Link = Awaited<ReturnType<typeof readViewingLink>>;

/**
 * For what a viewing link's reader fetches: the link's row is asked at every request. A browser that follows a link
 * is told in a page why it has ended; a program gets problem JSON.
 */
export function viewRoute<Params extends { link: string }>(
  work: (context: { link: Link; params: Params }) => Promise<Response>,
) {
  return route<Params>({ access: 'public' }, async ({ request, params }) => {
    try {
      return await work({ link: await linkOf(params.link), params });
    } catch (error) {
      if (error instanceof WitnessmarkError && wantsPage(request)) return refusalPage(error, request);
      throw error;
    }
  });
}

async function linkOf(id: string): Promise<Link> {
  if (!z.uuid().safeParse(id).success) throw notFound('viewing link');
  return readViewingLink({ id, cameByAddress: await isReading('links', id) });
}

const wantsPage = (request: NextRequest) => request.headers.get('accept')?.includes('text/html') === true;
