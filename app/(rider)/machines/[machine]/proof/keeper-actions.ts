'use server';

import { revalidatePath } from 'next/cache';
import { z } from 'zod';
import { formAction } from '@/lib/auth/action';
import { paths } from '@/lib/paths';
import { removeKeeper } from '@/lib/services/answer-keeper';
import { askCheckpointKeeper, keeperInput } from '@/lib/services/ask-checkpoint-keeper';

const machine = z.uuid('Reload the page and try again.');

export const askKeeperAction = formAction({ schema: keeperInput.extend({ machine }) }, async ({ input, person }) => {
  await askCheckpointKeeper({ person, machineId: input.machine, input: { email: input.email } });
  revalidatePath(paths.proof(input.machine));
  return { message: `${input.email} was asked by mail.` };
});

export const removeKeeperAction = formAction({ schema: z.object({ keeper: z.uuid() }) }, async ({ input, person }) => {
  const { machineId } = await removeKeeper({ person, id: input.keeper });
  revalidatePath(paths.proof(machineId));
});
