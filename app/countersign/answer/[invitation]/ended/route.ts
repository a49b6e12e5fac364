import type { NextRequest } from 'next/server';
import { refusalPage } from '@/app/v/swap-address';
import { isReading } from '@/lib/auth/reader-cookie';
import { asRefusal } from '@/lib/auth/refusal';
import { currentPerson } from '@/lib/auth/session';
import { paths } from '@/lib/paths';
import { readInvitation } from '@/lib/services/open-invitation';

/** Says why an invitation can no longer be answered. */
export async function GET(request: NextRequest, { params }: { params: Promise<{ invitation: string }> }) {
  const { invitation: id } = await params;
  try {
    const cameByAddress = await isReading('invitations', id);
    await readInvitation({ id, cameByAddress, person: await currentPerson() });
    return new Response(null, { status: 303, headers: { location: paths.invitationAnswer(id) } });
  } catch (error) {
    return refusalPage(asRefusal(error), request);
  }
}
