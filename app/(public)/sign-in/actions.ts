'use server';

import { redirect } from 'next/navigation';
import { z } from 'zod';
import { formAction } from '@/lib/auth/action';
import { knownDeviceCookie } from '@/lib/auth/cookies';
import { emailField, givenPasswordField } from '@/lib/auth/fields';
import { localPath } from '@/lib/auth/local-path';
import { currentSession, forgetSession, keepSession } from '@/lib/auth/session';
import { visitorAddress, visitorDevice } from '@/lib/auth/visitor';
import { paths } from '@/lib/paths';
import { signIn } from '@/lib/services/sign-in';
import { signOut } from '@/lib/services/sign-out';

const schema = z.object({ email: emailField, password: givenPasswordField, next: z.string().optional() });

export const signInAction = formAction({ schema, access: 'public' }, async ({ input }) => {
  const previous = await currentSession();
  const { id, people } = await knownDeviceCookie();
  const begun = await signIn({
    email: input.email,
    password: input.password,
    address: await visitorAddress(),
    device: await visitorDevice(),
    knownDevice: { id, people },
    previousSession: previous === null ? undefined : { id: previous.session.id, personId: previous.person.id },
  });
  await keepSession(begun);
  redirect(localPath(input.next) ?? paths.start);
});

export const signOutAction = formAction({ schema: z.object({}), access: 'public' }, async () => {
  const current = await currentSession();
  if (current !== null) await signOut({ sessionId: current.session.id, personId: current.person.id });
  await forgetSession();
  redirect(`${paths.signIn}?after=signed-out`);
});
