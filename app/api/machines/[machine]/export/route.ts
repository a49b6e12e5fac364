import { z } from 'zod';
import { route } from '@/lib/auth/route';
import { notFound } from '@/lib/errors';
import { exportRecord } from '@/lib/services/export-record';
import { pullStream } from '@/lib/services/pull-stream';

const asked = z.object({ machine: z.uuid(), files: z.enum(['originals', 'copies']).default('originals') });

/** `GET ?files=originals|copies`: the whole record as a ZIP, streamed; its length is said beforehand. */
export const GET = route<{ machine: string }>({ access: 'signed-in' }, async ({ request, person, params }) => {
  const query = Object.fromEntries(new URL(request.url).searchParams);
  const parsed = asked.safeParse({ ...query, ...params });
  if (!parsed.success) throw notFound('machine');
  const { machine: machineId, files } = parsed.data;
  const { name, bytes, body } = await exportRecord({ person, machineId, files });
  return new Response(pullStream(body), {
    headers: {
      'Content-Type': 'application/zip',
      'Content-Length': String(bytes),
      'Content-Disposition': `attachment; filename="${name}"`,
      'Content-Security-Policy': "sandbox; default-src 'none'",
      'Cache-Control': 'private, no-store',
    },
  });
});
