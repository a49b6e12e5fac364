'use server';

import { revalidatePath } from 'next/cache';
import { redirect } from 'next/navigation';
import { z } from 'zod';
import { formAction } from '@/lib/auth/action';
import { paths } from '@/lib/paths';
import { blackOutInput, blackOutPicture } from '@/lib/services/black-out-picture';

const schema = blackOutInput.extend({
  machine: z.uuid('Reload the page and try again.'),
  seq: z.coerce.number().int().min(0),
});

export const blackOutAction = formAction({ schema }, async ({ input, person }) => {
  const { machine, seq, ...given } = input;
  const sealed = await blackOutPicture({ person, subject: { machine }, seq, input: given });
  revalidatePath(paths.bench(machine), 'layout');
  redirect(paths.entry(machine, sealed.seq));
});
