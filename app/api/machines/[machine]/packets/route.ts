import { z } from 'zod';
import { route } from '@/lib/auth/route';
import { notFound } from '@/lib/errors';
import { readJson } from '@/lib/services/read-json';
import { packetProgress } from '@/lib/services/read-packet';
import { refuseBackwards, scopeOf } from '@/lib/services/scope-input';
import { requestPacket, requestPacketInput } from '@/lib/services/request-packet';

/** `POST {purpose, opens, …}`: queues a packet of what is chosen and answers at once with its row. */
export const POST = route<{ machine: string }>({ access: 'signed-in' }, async ({ request, person, params }) => {
  if (!z.uuid().safeParse(params.machine).success) throw notFound('machine');
  const input = await readJson(request, requestPacketInput.superRefine(refuseBackwards));
  const packet = await requestPacket({ person, machineId: params.machine, input, scope: scopeOf(input) });
  return Response.json({ packet: packetProgress(packet) }, { status: 202 });
});
