'use server';

import { revalidatePath } from 'next/cache';
import { redirect } from 'next/navigation';
import { formAction } from '@/lib/auth/action';
import { paths } from '@/lib/paths';
import { sealAddendum, sealAddendumInput } from '@/lib/services/seal-addendum';

export const sealAddendumAction = formAction({ schema: sealAddendumInput }, async ({ input, person }) => {
  const { machine, refersToSeq, seq } = await sealAddendum({ person, input });
  revalidatePath(paths.bench(machine), 'layout');
  redirect(`${paths.entry(machine, refersToSeq)}#entry-${seq}`);
});
