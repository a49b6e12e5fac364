'use server';

import { revalidatePath } from 'next/cache';
import { z } from 'zod';
import { formAction } from '@/lib/auth/action';
import { paths } from '@/lib/paths';
import { requestPacket, requestPacketInput } from '@/lib/services/request-packet';
import { refuseBackwards, scopeOf } from '@/lib/services/scope-input';
import { revokeViewingLink } from '@/lib/services/revoke-viewing-link';
import { shareViewingLink, viewingLinkInput } from '@/lib/services/share-viewing-link';

const machine = z.uuid('Reload the page and try again.');

export const buildPacketAction = formAction(
  { schema: requestPacketInput.extend({ machine }).superRefine(refuseBackwards) },
  async ({ input, person }) => {
    const { machine: machineId, purpose } = input;
    const { number } = await requestPacket({ person, machineId, input: { purpose }, scope: scopeOf(input) });
    revalidatePath(paths.proof(machineId));
    return { message: `Packet ${number} is being built. You can go on; it appears below.` };
  },
);

/** The message of its answer is the address itself, which is kept nowhere and shown once. */
export const makeLinkAction = formAction(
  { schema: viewingLinkInput.extend({ machine }).superRefine(refuseBackwards) },
  async ({ input, person }) => {
    const { machine: machineId, label, lasts } = input;
    const { url } = await shareViewingLink({ person, machineId, input: { label, lasts }, scope: scopeOf(input) });
    revalidatePath(paths.proof(machineId));
    return { message: url };
  },
);

export const revokeLinkAction = formAction({ schema: z.object({ link: z.uuid() }) }, async ({ input, person }) => {
  const { machineId } = await revokeViewingLink({ person, id: input.link });
  revalidatePath(paths.proof(machineId));
});
