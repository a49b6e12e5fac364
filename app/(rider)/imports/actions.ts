'use server';

import { redirect } from 'next/navigation';
import { revalidatePath } from 'next/cache';
import { z } from 'zod';
import { formAction } from '@/lib/auth/action';
import { idField } from '@/lib/auth/fields';
import { paths } from '@/lib/paths';
import { keepImport } from '@/lib/services/keep-import';
import { recheckImport } from '@/lib/services/recheck-import';
import { discardImport, removeImport } from '@/lib/services/remove-import';

const longestKey = 300;
const keyField = z.string().trim().min(1, 'Type the key or its fingerprint.').max(longestKey, 'A key is shorter.');

export const recheckImportAction = formAction(
  { schema: z.object({ import: idField, key: keyField }) },
  async ({ input, person }) => {
    await recheckImport({ person, id: input.import, key: input.key });
    revalidatePath(paths.stagedImport(input.import));
    return {
      message: 'It was checked again, with the key you gave. What is shown here is what that found.',
      keep: true,
    };
  },
);

export const keepImportAction = formAction({ schema: z.object({ import: idField }) }, async ({ input, person }) => {
  const { id } = await keepImport({ person, id: input.import });
  revalidatePath(paths.imports);
  redirect(paths.import(id));
});

export const discardImportAction = formAction({ schema: z.object({ import: idField }) }, async ({ input, person }) => {
  await discardImport({ person, id: input.import });
  redirect(paths.imports);
});

export const removeImportAction = formAction({ schema: z.object({ import: idField }) }, async ({ input, person }) => {
  await removeImport({ person, id: input.import });
  revalidatePath(paths.imports);
  redirect(paths.imports);
});
