'use server';

import { revalidatePath } from 'next/cache';
import { redirect } from 'next/navigation';
import { z } from 'zod';
import { formAction } from '@/lib/auth/action';
import { isReading } from '@/lib/auth/reader-cookie';
import { paths } from '@/lib/paths';
import { answerInput, answerInvitation } from '@/lib/services/answer-invitation';
import { createShop, shopInput } from '@/lib/services/create-shop';

const invitation = z.uuid('Reload the page and try again.');

export const nameShopAction = formAction({ schema: shopInput.extend({ invitation }) }, async ({ input, person }) => {
  const { invitation: id, ...shop } = input;
  await createShop({ person, input: shop });
  revalidatePath(paths.invitationAnswer(id));
  redirect(`${paths.invitationAnswer(id)}#answer`);
});

export const answerAction = formAction(
  {
    schema: z.intersection(z.object({ invitation, shop: z.uuid('Name the shop you answer for first.') }), answerInput),
  },
  async ({ input, person }) => {
    const { invitation: id, shop, ...answer } = input;
    const cameByAddress = await isReading('invitations', id);
    await answerInvitation({ person, invitationId: id, shopId: shop, cameByAddress, input: answer });
    revalidatePath(paths.invitationAnswer(id));
    redirect(paths.invitationAnswer(id));
  },
);
