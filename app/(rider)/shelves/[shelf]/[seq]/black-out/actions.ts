'use server';

import { revalidatePath } from 'next/cache';
import { redirect } from 'next/navigation';
import { z } from 'zod';
import { formAction } from '@/lib/auth/action';
import { paths } from '@/lib/paths';
import { blackOutInput, blackOutPicture } from '@/lib/services/black-out-picture';

const schema = blackOutInput.extend({
  shelf: z.uuid('Reload the page and try again.'),
  seq: z.coerce.number().int().min(0),
});

export const blackOutLineAction = formAction({ schema }, async ({ input, person }) => {
  const { shelf, seq, ...given } = input;
  const sealed = await blackOutPicture({ person, subject: { shelf }, seq, input: given });
  revalidatePath(paths.shelf(shelf), 'layout');
  redirect(paths.shelfEntry(shelf, sealed.seq));
});
