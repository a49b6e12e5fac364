'use server';

import { revalidatePath } from 'next/cache';
import { z } from 'zod';
import { formAction } from '@/lib/auth/action';
import { idField } from '@/lib/auth/fields';
import { paths } from '@/lib/paths';
import { challengeField, signatureAnswer } from '@/lib/services/passkey-answer';
import { prepareSignature } from '@/lib/services/prepare-signature';
import { signEntry } from '@/lib/services/sign-entry';

export const prepareSignatureAction = formAction(
  { schema: z.object({ machine: idField, seq: z.coerce.number().int().nonnegative() }) },
  async ({ input, person }) => ({ question: await prepareSignature({ person, ...input }) }),
);

export const signEntryAction = formAction(
  { schema: z.object({ challenge: challengeField, response: signatureAnswer }) },
  async ({ input, person }) => {
    const { machine, signs, seq } = await signEntry({ person, challenge: input.challenge, answer: input.response });
    revalidatePath(paths.bench(machine), 'layout');
    return { message: `Entry ${signs} is signed with your own key, in entry ${seq}.` };
  },
);
