import type { NextRequest } from 'next/server';
import { swapAddress } from '@/app/v/swap-address';
import { paths } from '@/lib/paths';
import { openInvitation } from '@/lib/services/open-invitation';

export async function GET(request: NextRequest, { params }: { params: Promise<{ token: string }> }) {
  const { token } = await params;
  return swapAddress(request, 'invitations', async () => {
    const { id } = await openInvitation(token);
    return { id, path: paths.invitationAnswer(id) };
  });
}
