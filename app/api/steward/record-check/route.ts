import { route } from '@/lib/auth/route';
import { readRecordCheck } from '@/lib/services/run-record-check';

export const dynamic = 'force-dynamic';

/** How far the check of every record is, and what the last one found. */
export const GET = route({ access: 'steward' }, async ({ person }) =>
  Response.json({ check: await readRecordCheck({ person }) }),
);
