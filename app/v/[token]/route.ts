import type { NextRequest } from 'next/server';
import { swapAddress } from '@/app/v/swap-address';
import { paths } from '@/lib/paths';
import { openViewingLink } from '@/lib/services/open-viewing-link';

export async function GET(request: NextRequest, { params }: { params: Promise<{ token: string }> }) {
  const { token } = await params;
  return swapAddress(request, 'links', async () => {
    const { id } = await openViewingLink(token);
    return { id, path: paths.viewing(id) };
  });
}
