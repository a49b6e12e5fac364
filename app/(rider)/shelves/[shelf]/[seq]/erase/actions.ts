'use server';

import { revalidatePath } from 'next/cache';
import { redirect } from 'next/navigation';
import { z } from 'zod';
import { formAction } from '@/lib/auth/action';
import { paths } from '@/lib/paths';
import { eraseInput, erasePart } from '@/lib/services/erase-part';

const schema = eraseInput.extend({
  shelf: z.uuid('Reload the page and try again.'),
  seq: z.coerce.number().int().min(0),
});

export const eraseLineAction = formAction({ schema }, async ({ input, person }) => {
  const { shelf, seq, ...given } = input;
  await erasePart({ person, subject: { shelf }, seq, input: given });
  revalidatePath(paths.shelf(shelf), 'layout');
  redirect(paths.shelfEntry(shelf, seq));
});
