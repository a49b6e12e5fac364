import { viewRoute } from '@/app/api/view/view-route';
import { openOfferedPacket } from '@/lib/services/offered-packet';

export const GET = viewRoute<{ link: string }>(async ({ link }) => {
  const { body, headers } = await openOfferedPacket(link);
  return new Response(body, { headers });
});
