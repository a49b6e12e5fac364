import 'server-only';
import { machineById } from '@/db/queries/machines';
import { findPerson } from '@/db/queries/people';
import { findShop, shopOf } from '@/db/queries/shops';
import type { InvitationRow } from '@/db/queries/invitations';
import type { PersonRow } from '@/db/models/people';
import { standingOf } from '@/lib/auth/guard';
import { notFound } from '@/lib/errors';
import { areTimesInjected } from '@/lib/packet/content';
import { readInvitation } from '@/lib/services/open-invitation';
import { readRecord } from '@/lib/services/read-record';
import type { EntryView, PurchaseView, RecordView } from '@/lib/services/record-view';

export interface InvitedEntry {
  invitation: {
    id: string;
    message: string;
    invitedBy: string;
    email: string;
    createdAt: string;
    expiresAt: string;
    answer: {
      outcome: 'countersigned' | 'declined';
      at: string;
      seq: number | null;
      shop: string;
      reason: string;
    } | null;
  };
  machine: { id: string; name: string; vin: string | null };
  entry: EntryView;
  /** What the entry drew from. */
  purchases: PurchaseView[];
  record: RecordView;
  zone: string;
  timesInjected: boolean;
  /** The shop the person answers for, if they have one. */
  shop: { id: string; name: string; isConfirmed: boolean } | null;
  /** The person owns the machine or helps with it, and so cannot countersign. */
  isOwn: boolean;
}

/** The one entry that somebody was asked to countersign, as it was sealed. Throws `not-found` or `gone`. */
export async function readInvitedEntry(options: {
  id: string;
  cameByAddress: boolean;
  person: PersonRow | null;
}): Promise<InvitedEntry> {
  const invitation = await readInvitation(options);
  const { person } = options;
  const [machine, inviter, shop, standing] = await Promise.all([
    machineById(invitation.machineId),
    findPerson(invitation.invitedBy),
    person === null ? null : shopOf(person.id),
    person === null ? null : standingOf(person, { machine: invitation.machineId }),
  ]);
  if (machine === null) throw notFound('invitation');
  const record = await readRecord({ machineId: machine.id });
  const entry = record.entries[invitation.seq];
  if (entry === undefined) throw notFound('entry');
  return {
    invitation: {
      id: invitation.id,
      message: invitation.message,
      invitedBy: inviter?.name ?? 'an owner whose account is gone',
      email: invitation.email,
      createdAt: invitation.createdAt,
      expiresAt: invitation.expiresAt,
      answer: await answerOf(invitation),
    },
    machine: { id: machine.id, name: record.machine.name, vin: record.identity?.vin ?? null },
    entry,
    purchases: record.shelves.flatMap(({ purchases }) => purchases.filter((one) => one.usedBy.includes(entry.seq))),
    record,
    zone: machine.timeZone,
    timesInjected: areTimesInjected(record),
    shop: shop === null ? null : { id: shop.id, name: shop.name, isConfirmed: shop.confirmedAt !== null },
    isOwn: standing !== null && standing.machine !== 'none',
  };
}

async function answerOf(invitation: InvitationRow): Promise<InvitedEntry['invitation']['answer']> {
  const { outcome, answeredAt, answerSeq, shopId, declineReason } = invitation;
  if (outcome === null || answeredAt === null) return null;
  const shop = shopId === null ? null : await findShop(shopId);
  return { outcome, at: answeredAt, seq: answerSeq, shop: shop?.name ?? 'a shop', reason: declineReason ?? '' };
}
