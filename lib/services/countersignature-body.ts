import 'server-only';
import type { Transaction } from '@/db/index';
import { findInvitation, type InvitationRow } from '@/db/queries/invitations';
import { findShop } from '@/db/queries/shops';
import { invalidInput } from '@/lib/errors';
import type { CountersignatureBody, CountersignCapacity } from '@/lib/evidence/format';
import { demandStanding } from '@/lib/services/demand-standing';
import { refuseEnded } from '@/lib/services/open-invitation';
import { answeredAlready } from '@/lib/services/record-answer';

/** What a countersignature says, as it is at this moment. Throws `conflict` once the invitation was answered or its entry struck. */
export async function countersignatureBody(options: {
  invitation: InvitationRow;
  shopId: string;
  input: { capacity: CountersignCapacity; statement: string };
  transaction?: Transaction;
}): Promise<CountersignatureBody> {
  const { invitation, shopId, input, transaction } = options;
  const current = await findInvitation(invitation.id, transaction === undefined ? {} : { transaction });
  if (current === null || current.answeredAt !== null) throw answeredAlready();
  refuseEnded(current);
  const { logId: log, seq } = invitation;
  await demandStanding({ log, seq, ...(transaction === undefined ? {} : { transaction }) });
  const shop = await findShop(shopId, transaction);
  if (shop === null) throw invalidInput({ shop: 'Name the shop you answer for first.' });
  return {
    capacity: input.capacity,
    statement: input.statement,
    shop: {
      name: shop.name,
      ...(shop.address === null ? {} : { address: shop.address }),
      ...(shop.registration === null ? {} : { registration: shop.registration }),
      accountSince: shop.createdAt,
      confirmedBy: shop.confirmedBy === null ? null : 'steward',
    },
    // An id: a name belongs in an author part, where it can be withheld.
    invitedBy: invitation.invitedBy,
  };
}
