'use server';

import { revalidatePath } from 'next/cache';
import { z } from 'zod';
import { formAction } from '@/lib/auth/action';
import { givenPasswordField, idField, nameField, newPasswordField, timeZoneField } from '@/lib/auth/fields';
import { requireSession } from '@/lib/auth/session';
import { paths } from '@/lib/paths';
import { changeAccount } from '@/lib/services/change-account';
import { changePassword } from '@/lib/services/change-password';
import { endOneSession, endOtherSessions } from '@/lib/services/end-session';
import { unitOptions } from './choices';

const unitField = (dimension: keyof typeof unitOptions) =>
  z.enum(
    unitOptions[dimension].map(({ value }) => value),
    'Choose a unit from the list.',
  );

const accountSchema = z.object({
  name: nameField,
  distanceUnit: unitField('distance'),
  volumeUnit: unitField('volume'),
  torqueUnit: unitField('torque'),
  timeZone: timeZoneField,
});

export const changeAccountAction = formAction({ schema: accountSchema }, async ({ input, person }) => {
  await changeAccount({ person, changes: input });
  revalidatePath(paths.account, 'layout');
  return { message: 'Your changes are kept.', keep: true };
});

const passwordSchema = z.object({ password: givenPasswordField, newPassword: newPasswordField });

export const changePasswordAction = formAction({ schema: passwordSchema }, async ({ input }) => {
  const { person, session } = await requireSession();
  await changePassword({ person, sessionId: session.id, ...input });
  revalidatePath(paths.account);
  return { message: 'Your password is changed, and every other session is ended.' };
});

export const endOneAction = formAction({ schema: z.object({ session: idField }) }, async ({ input, person }) => {
  await endOneSession({ person, session: input.session });
  revalidatePath(paths.account);
  return { message: 'That session is ended.' };
});

export const endOthersAction = formAction({ schema: z.object({}) }, async () => {
  const { person, session } = await requireSession();
  const ended = await endOtherSessions({ person, current: session.id });
  revalidatePath(paths.account);
  return { message: ended === 1 ? 'The other session is ended.' : `${ended} other sessions are ended.` };
});
