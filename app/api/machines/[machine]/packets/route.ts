import { z } from 'zod';
import { route } from '@/lib/auth/route';
import { notFound } from '@/lib/errors';
import { readJson } from '@/lib/services/read-json';
import { packetProgress } from '@/lib/services/read-packet';
import { requestPacket, requestPacketInput } from '@/lib/services/request-packet';

/** `POST {purpose}`: queues a packet and answers at once with its row. */
export const POST = route<{ machine: string }>({ access: 'signed-in' }, async ({ request, person, params }) => {
  if (!z.uuid().safeParse(params.machine).success) throw notFound('machine');
  const input = await readJson(request, requestPacketInput);
  const packet = await requestPacket({ person, machineId: params.machine, input });
  return Response.json({ packet: packetProgress(packet) }, { status: 202 });
});
