'use server';

import { revalidatePath } from 'next/cache';
import { redirect } from 'next/navigation';
import { z } from 'zod';
import { formAction } from '@/lib/auth/action';
import { paths } from '@/lib/paths';
import { strikeEntry, strikeInput } from '@/lib/services/strike-entry';

const schema = strikeInput.extend({
  machine: z.uuid('Reload the page and try again.'),
  seq: z.coerce.number().int().min(0),
});

export const strikeAction = formAction({ schema }, async ({ input, person }) => {
  const { machine, seq, ...given } = input;
  await strikeEntry({ person, subject: { machine }, seq, input: given });
  revalidatePath(paths.bench(machine), 'layout');
  revalidatePath('/shelves', 'layout');
  redirect(paths.entry(machine, seq));
});
