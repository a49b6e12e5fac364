import { z } from 'zod';
import { route } from '@/lib/auth/route';
import { notFound } from '@/lib/errors';
import { packetProgress, readPacket } from '@/lib/services/read-packet';

export const GET = route<{ packet: string }>({ access: 'signed-in' }, async ({ person, params }) => {
  if (!z.uuid().safeParse(params.packet).success) throw notFound('packet');
  return Response.json({ packet: packetProgress(await readPacket({ person, id: params.packet })) });
});
