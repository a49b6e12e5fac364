'use server';

import { revalidatePath } from 'next/cache';
import { z } from 'zod';
import { formAction } from '@/lib/auth/action';
import { givenPasswordField, idField, nameField } from '@/lib/auth/fields';
import { paths } from '@/lib/paths';
import { addPasskey } from '@/lib/services/add-passkey';
import { beginPasskey } from '@/lib/services/begin-passkey';
import { challengeField, newKeyAnswer } from '@/lib/services/passkey-answer';
import { removePasskey } from '@/lib/services/remove-passkey';

const name = nameField.max(60, 'A name has at most 60 characters here.');

export const beginPasskeyAction = formAction(
  { schema: z.object({ name, password: givenPasswordField }) },
  async ({ input, person }) => ({ question: await beginPasskey({ person, password: input.password }), keep: true }),
);

export const addPasskeyAction = formAction(
  { schema: z.object({ name, challenge: challengeField, response: newKeyAnswer }) },
  async ({ input, person }) => {
    await addPasskey({ person, name: input.name, challenge: input.challenge, answer: input.response });
    revalidatePath(paths.account);
    return { message: `The key ${input.name} is added.` };
  },
);

export const removePasskeyAction = formAction({ schema: z.object({ passkey: idField }) }, async ({ input, person }) => {
  await removePasskey({ person, passkey: input.passkey });
  revalidatePath(paths.account);
});
