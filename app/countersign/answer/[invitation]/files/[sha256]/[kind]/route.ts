import { z } from 'zod';
import { isReading } from '@/lib/auth/reader-cookie';
import { route } from '@/lib/auth/route';
import { notFound } from '@/lib/errors';
import { readInvitation } from '@/lib/services/open-invitation';
import { readRecordFile } from '@/lib/services/read-record-file';

const asked = z.object({
  invitation: z.uuid(),
  sha256: z.string().regex(/^[0-9a-f]{64}$/),
  kind: z.enum(['thumb', 'plate', 'copy']),
});

/** Pictures and papers of the one entry that somebody was asked to countersign. */
export const GET = route<{ invitation: string; sha256: string; kind: string }>(
  { access: 'public' },
  async ({ person, params }) => {
    const parsed = asked.safeParse(params);
    if (!parsed.success) throw notFound('file');
    const { invitation: id, sha256, kind } = parsed.data;
    const cameByAddress = await isReading('invitations', id);
    const { machineId, seq } = await readInvitation({ id, cameByAddress, person });
    const file = await readRecordFile({ machineId, seq, sha256, kind });
    return new Response(file.body, { headers: file.headers });
  },
);
