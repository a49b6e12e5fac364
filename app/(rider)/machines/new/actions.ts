'use server';

import { revalidatePath } from 'next/cache';
import { redirect } from 'next/navigation';
import { formAction } from '@/lib/auth/action';
import { paths } from '@/lib/paths';
import { createMachine } from '@/lib/services/create-machine';
import { machineInput } from '@/lib/services/machine-input';

export const setUpMachine = formAction({ schema: machineInput }, async ({ input, person }) => {
  const { machine } = await createMachine({ person, input });
  // The shell's list of machines stands in the layout. Never the root: /garage would be made again, and its scripts
  // would no longer be those whose hashes its policy names.
  revalidatePath('/machines', 'layout');
  redirect(paths.bench(machine));
});
