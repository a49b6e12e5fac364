import { z } from 'zod';
import { route } from '@/lib/auth/route';
import { notFound } from '@/lib/errors';
import { bundleForOwner } from '@/lib/services/bundle-for-owner';

/** The record as it stands now, to be checked and to be compared with an older file. */
export const GET = route<{ machine: string }>({ access: 'signed-in' }, async ({ person, params }) => {
  if (!z.uuid().safeParse(params.machine).success) throw notFound('machine');
  const text = await bundleForOwner({ person, machineId: params.machine });
  return new Response(text, {
    headers: { 'content-type': 'application/json', 'content-disposition': 'attachment; filename="record.json"' },
  });
});
