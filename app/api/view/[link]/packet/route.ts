import { viewRoute } from '@/app/api/view/view-route';
import { openNewestPacket } from '@/lib/services/read-viewing';

export const GET = viewRoute<{ link: string }>(async ({ link }) => {
  const { body, headers } = await openNewestPacket({ machineId: link.machineId });
  return new Response(body, { headers });
});
