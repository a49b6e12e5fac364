import { z } from 'zod';
import { route } from '@/lib/auth/route';
import { notFound } from '@/lib/errors';
import { authoriseSubject } from '@/lib/services/authorise-subject';
import { readFileOf } from '@/lib/services/read-file';

const asked = z.object({
  sha256: z.string().regex(/^[0-9a-f]{64}$/),
  kind: z.enum(['thumb', 'plate', 'copy', 'original']),
  subject: z.uuid(),
});

export const GET = route<{ sha256: string; kind: string }>(
  { access: 'signed-in' },
  async ({ request, person, params }) => {
    const parsed = asked.safeParse({ ...params, subject: new URL(request.url).searchParams.get('for') });
    if (!parsed.success) throw notFound('file');
    const { subject, sha256, kind } = parsed.data;
    await authoriseSubject({ person, subject });
    const file = await readFileOf({ subject, sha256, kind });
    return new Response(file.body, { headers: file.headers });
  },
);
