import { z } from 'zod';
import { route } from '@/lib/auth/route';
import { notFound } from '@/lib/errors';
import { readImportedPicture } from '@/lib/services/read-imported-file';

const asked = z.object({
  import: z.uuid(),
  sha256: z.string().regex(/^[0-9a-f]{64}$/),
  kind: z.enum(['thumb', 'plate']),
});

export const GET = route<{ import: string; sha256: string; kind: string }>(
  { access: 'signed-in' },
  async ({ person, params }) => {
    const parsed = asked.safeParse(params);
    if (!parsed.success) throw notFound('picture');
    const { import: id, sha256, kind } = parsed.data;
    const { body, headers } = await readImportedPicture({ person, id, sha256, kind });
    return new Response(body, { headers });
  },
);
