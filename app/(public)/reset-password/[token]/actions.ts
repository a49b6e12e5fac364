'use server';

import { redirect } from 'next/navigation';
import { z } from 'zod';
import { formAction } from '@/lib/auth/action';
import { newPasswordField } from '@/lib/auth/fields';
import { forgetSession } from '@/lib/auth/session';
import { visitorAddress } from '@/lib/auth/visitor';
import { paths } from '@/lib/paths';
import { resetPassword } from '@/lib/services/reset-password';

export const resetPasswordAction = formAction(
  { schema: z.object({ token: z.string().max(100), password: newPasswordField }), access: 'public' },
  async ({ input }) => {
    await resetPassword({ ...input, address: await visitorAddress() });
    await forgetSession();
    redirect(`${paths.signIn}?after=new-password`);
  },
);
