'use server';

import { revalidatePath } from 'next/cache';
import { redirect } from 'next/navigation';
import { z } from 'zod';
import { formAction } from '@/lib/auth/action';
import { paths } from '@/lib/paths';
import { sealWorksheet } from '@/lib/services/seal-worksheet';
import { deviceId } from '@/lib/services/start-draft';

const sealInput = z.object({
  worksheet: deviceId,
  /** Fingerprint of the entry the person was shown. */
  reviewed: z.string().min(1, 'Reload the page and read the entry again.'),
  /** The person wants to sign it with a key of their own as soon as it is sealed. */
  sign: z.literal('yes').optional(),
});

export const seal = formAction({ schema: sealInput }, async ({ input, person }) => {
  const { worksheet, reviewed, sign } = input;
  const { machine, seq } = await sealWorksheet({ person, draftId: worksheet, reviewed });
  revalidatePath(paths.bench(machine), 'layout');
  redirect(`${paths.entry(machine, seq)}?sealed=now${sign === undefined ? '' : '&sign=now'}`);
});
