import { z } from 'zod';
import { viewRoute } from '@/app/api/view/view-route';
import { readScope } from '@/lib/domain/stored-scope';
import { notFound } from '@/lib/errors';
import { readRecordFile } from '@/lib/services/read-record-file';

const asked = z.object({
  sha256: z.string().regex(/^[0-9a-f]{64}$/),
  kind: z.enum(['thumb', 'plate', 'copy']),
});

export const GET = viewRoute<{ link: string; sha256: string; kind: string }>(async ({ link, params }) => {
  const parsed = asked.safeParse(params);
  if (!parsed.success) throw notFound('file');
  const file = await readRecordFile({ machineId: link.machineId, scope: readScope(link.scope), ...parsed.data });
  return new Response(file.body, { headers: file.headers });
});
