import { z } from 'zod';
import { route } from '@/lib/auth/route';
import { notFound } from '@/lib/errors';
import { pullStream } from '@/lib/services/pull-stream';
import { openImportedFile } from '@/lib/services/read-imported-file';

export const GET = route<{ import: string }>({ access: 'signed-in' }, async ({ person, params }) => {
  if (!z.uuid().safeParse(params.import).success) throw notFound('imported record');
  const { bytes, name, body } = await openImportedFile({ person, id: params.import });
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
