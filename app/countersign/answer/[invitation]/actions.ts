'use server';

import { revalidatePath } from 'next/cache';
import { redirect } from 'next/navigation';
import { z } from 'zod';
import { formAction } from '@/lib/auth/action';
import { isReading } from '@/lib/auth/reader-cookie';
import { paths } from '@/lib/paths';
import { answerInput, answerInvitation } from '@/lib/services/answer-invitation';
import { createShop, shopInput } from '@/lib/services/create-shop';
import { challengeField, signatureAnswer } from '@/lib/services/passkey-answer';
import { prepareCountersignature } from '@/lib/services/prepare-countersignature';
import { signCountersignature } from '@/lib/services/sign-countersignature';

const invitation = z.uuid('Reload the page and try again.');

export const nameShopAction = formAction({ schema: shopInput.extend({ invitation }) }, async ({ input, person }) => {
  const { invitation: id, ...shop } = input;
  await createShop({ person, input: shop });
  revalidatePath(paths.invitationAnswer(id));
  redirect(`${paths.invitationAnswer(id)}#answer`);
});

export const answerAction = formAction(
  {
    schema: z.intersection(
      z.object({
        invitation,
        shop: z.uuid('Name the shop you answer for first.'),
        /** The person wants to sign the statement with a key of their own: nothing is sealed yet. */
        sign: z.literal('yes').optional(),
      }),
      answerInput,
    ),
  },
  async ({ input, person }) => {
    const { invitation: id, shop, sign, ...answer } = input;
    const cameByAddress = await isReading('invitations', id);
    const answerer = { person, invitationId: id, shopId: shop, cameByAddress };
    if (sign !== undefined && answer.answer === 'countersign') {
      return { question: await prepareCountersignature({ ...answerer, input: answer }), keep: true };
    }
    await answerInvitation({ ...answerer, input: answer });
    revalidatePath(paths.invitationAnswer(id));
    redirect(paths.invitationAnswer(id));
  },
);

export const signCountersignatureAction = formAction(
  { schema: z.object({ invitation, challenge: challengeField, response: signatureAnswer }) },
  async ({ input, person }) => {
    const { invitation: id, challenge, response } = input;
    const cameByAddress = await isReading('invitations', id);
    const { seq } = await signCountersignature({
      person,
      invitationId: id,
      cameByAddress,
      challenge,
      answer: response,
    });
    revalidatePath(paths.invitationAnswer(id));
    return { message: `Countersigned and signed with your own key, in entry ${seq}.` };
  },
);
