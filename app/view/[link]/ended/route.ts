import type { NextRequest } from 'next/server';
import { refusalPage } from '@/app/v/swap-address';
import { isReading } from '@/lib/auth/reader-cookie';
import { asRefusal } from '@/lib/auth/refusal';
import { paths } from '@/lib/paths';
import { readViewingLink } from '@/lib/services/open-viewing-link';

/** Says why a viewing link shows nothing any more. */
export async function GET(request: NextRequest, { params }: { params: Promise<{ link: string }> }) {
  const { link } = await params;
  try {
    await readViewingLink({ id: link, cameByAddress: await isReading('links', link) });
    return new Response(null, { status: 303, headers: { location: paths.viewing(link) } });
  } catch (error) {
    return refusalPage(asRefusal(error), request);
  }
}
