'use server';

import { redirect } from 'next/navigation';
import { after } from 'next/server';
import { z } from 'zod';
import { formAction } from '@/lib/auth/action';
import { emailField } from '@/lib/auth/fields';
import { asRefusal } from '@/lib/auth/refusal';
import { visitorAddress } from '@/lib/auth/visitor';
import { paths } from '@/lib/paths';
import { admitPasswordReset, requestPasswordReset } from '@/lib/services/request-password-reset';

export const forgotPasswordAction = formAction(
  { schema: z.object({ email: emailField }), access: 'public' },
  async ({ input }) => {
    await admitPasswordReset({ email: input.email, address: await visitorAddress() });
    after(async () => {
      // Nobody waits for this any more: a failure can only be told to the log.
      await requestPasswordReset(input).catch(asRefusal);
    });
    redirect(`${paths.checkMail}?for=reset`);
  },
);
