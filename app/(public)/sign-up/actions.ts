'use server';

import { redirect } from 'next/navigation';
import { z } from 'zod';
import { formAction } from '@/lib/auth/action';
import { emailField, nameField, newPasswordField, timeZoneField } from '@/lib/auth/fields';
import { visitorAddress } from '@/lib/auth/visitor';
import { paths } from '@/lib/paths';
import { signUp } from '@/lib/services/sign-up';

const unitsOf = {
  us: { distanceUnit: '[mi_i]', volumeUnit: '[qt_us]', torqueUnit: '[ft_i].[lbf_av]' },
  metric: { distanceUnit: 'km', volumeUnit: 'L', torqueUnit: 'N.m' },
} as const;

const schema = z.object({
  name: nameField,
  email: emailField,
  password: newPasswordField,
  units: z.enum(['us', 'metric'], 'Choose the units you work in.'),
  // Told by the device, not by the person: what is not known here becomes UTC and can be changed later.
  timeZone: timeZoneField.catch('UTC'),
});

export const signUpAction = formAction({ schema, access: 'public' }, async ({ input }) => {
  const { units, timeZone, ...account } = input;
  await signUp({ ...account, preferences: { ...unitsOf[units], timeZone }, address: await visitorAddress() });
  redirect(`${paths.checkMail}?for=sign-up`);
});
