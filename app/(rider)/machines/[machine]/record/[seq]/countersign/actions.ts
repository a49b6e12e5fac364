'use server';

import { revalidatePath } from 'next/cache';
import { z } from 'zod';
import { formAction } from '@/lib/auth/action';
import { paths } from '@/lib/paths';
import { invitationInput, inviteCountersigner } from '@/lib/services/invite-countersigner';
import { withdrawInvitation } from '@/lib/services/withdraw-invitation';

const inviteInput = invitationInput.extend({
  machine: z.uuid('Reload the page and try again.'),
  seq: z.coerce.number().int().min(0),
});

export const inviteAction = formAction({ schema: inviteInput }, async ({ input, person }) => {
  const { machine, seq, email, message } = input;
  await inviteCountersigner({ person, machineId: machine, seq, input: { email, message } });
  revalidatePath(paths.inviteShop(machine, seq));
  return { message: `The invitation is on its way to ${email}.` };
});

export const withdrawAction = formAction({ schema: z.object({ invitation: z.uuid() }) }, async ({ input, person }) => {
  await withdrawInvitation({ person, id: input.invitation });
  revalidatePath('/machines', 'layout');
});
