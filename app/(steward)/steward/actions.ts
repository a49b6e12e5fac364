'use server';

import { z } from 'zod';
import { formAction } from '@/lib/auth/action';
import { startRecordCheck } from '@/lib/services/run-record-check';

/** The page asks how far it is by itself. */
export const checkRecordsAction = formAction({ schema: z.object({}), access: 'steward' }, async ({ person }) => {
  await startRecordCheck({ person });
});
