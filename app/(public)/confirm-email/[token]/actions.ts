'use server';

import { redirect } from 'next/navigation';
import { z } from 'zod';
import { formAction } from '@/lib/auth/action';
import { visitorAddress } from '@/lib/auth/visitor';
import { paths } from '@/lib/paths';
import { confirmEmail } from '@/lib/services/confirm-email';

export const confirmEmailAction = formAction(
  { schema: z.object({ token: z.string().max(100) }), access: 'public' },
  async ({ input }) => {
    await confirmEmail({ token: input.token, address: await visitorAddress() });
    redirect(`${paths.signIn}?after=confirmed`);
  },
);
