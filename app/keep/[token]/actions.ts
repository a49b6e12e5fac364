'use server';

import { revalidatePath } from 'next/cache';
import { z } from 'zod';
import { formAction } from '@/lib/auth/action';
import { visitorAddress } from '@/lib/auth/visitor';
import { paths } from '@/lib/paths';
import { agreeToKeep, stopKeeping } from '@/lib/services/answer-keeper';

const schema = z.object({ token: z.string().max(100) });

export const agreeToKeepAction = formAction({ schema, access: 'public' }, async ({ input }) => {
  await agreeToKeep({ token: input.token, address: await visitorAddress() });
  revalidatePath(paths.keeper(input.token));
  return { message: 'Good. The next checkpoint comes by mail.' };
});

export const stopKeepingAction = formAction({ schema, access: 'public' }, async ({ input }) => {
  await stopKeeping({ token: input.token, address: await visitorAddress() });
  revalidatePath(paths.keeper(input.token));
  return { message: 'Stopped. No more mails come.' };
});
