import 'server-only';
import { invitationsOfEntry, invitationsToEmail, type InvitationRow } from '@/db/queries/invitations';
import { findEntry } from '@/db/queries/entries';
import { findLogOf } from '@/db/queries/logs';
import { machineById } from '@/db/queries/machines';
import { findPerson } from '@/db/queries/people';
import { findShop } from '@/db/queries/shops';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';
import { notFound } from '@/lib/errors';
import { now } from '@/lib/ports/clock';
import { machineName } from '@/lib/services/list-machines';

export type InvitationState = 'waiting' | 'opened' | 'countersigned' | 'declined' | 'withdrawn' | 'run-out';

export interface ListedInvitation {
  id: string;
  email: string;
  state: InvitationState;
  createdAt: string;
  expiresAt: string;
  openedAt: string | null;
  answeredAt: string | null;
  /** The countersignature's entry. */
  answerSeq: number | null;
  reason: string;
}

/** The invitations for one entry, newest first, for the machine's owner. */
export async function listEntryInvitations(options: { person: PersonRow; machineId: string; seq: number }) {
  const { person, machineId, seq } = options;
  await authorise({ person, action: 'share', machine: machineId });
  const [machine, log] = await Promise.all([machineById(machineId), findLogOf(machineId)]);
  const entry = log === null ? null : await findEntry(log.id, seq);
  if (machine === null || log === null || entry === null) throw notFound('entry');
  const at = now().toISOString();
  return {
    machine: { id: machine.id, name: machineName(machine), timeZone: machine.timeZone },
    kind: entry.kind,
    invitations: (await invitationsOfEntry(log.id, seq)).map((row) => listed(row, at)),
  };
}

export interface ShopInvitation extends ListedInvitation {
  seq: number;
  machine: string;
  invitedBy: string;
  zone: string;
}

/** A shop's page: what it is, and what its technician was asked at their confirmed address. */
export async function readShopPage(options: { person: PersonRow; shopId: string }) {
  const { person, shopId } = options;
  await authorise({ person, action: 'countersign', shop: shopId });
  const shop = await findShop(shopId);
  if (shop === null) throw notFound('shop');
  const at = now().toISOString();
  const rows = person.emailConfirmedAt === null ? [] : await invitationsToEmail(person.email);
  const invitations = await Promise.all(
    rows.map(async (row): Promise<ShopInvitation> => {
      const [machine, inviter] = await Promise.all([machineById(row.machineId), findPerson(row.invitedBy)]);
      return {
        ...listed(row, at),
        seq: row.seq,
        machine: machine === null ? 'a machine that is gone' : machineName(machine),
        invitedBy: inviter?.name ?? 'an owner whose account is gone',
        zone: person.timeZone,
      };
    }),
  );
  return {
    shop,
    toAnswer: invitations.filter(({ state }) => state === 'waiting' || state === 'opened'),
    others: invitations.filter(({ state }) => state !== 'waiting' && state !== 'opened'),
  };
}

function listed(row: InvitationRow, at: string): ListedInvitation {
  const { id, email, createdAt, expiresAt, openedAt, answeredAt, answerSeq, declineReason } = row;
  const base = { id, email, createdAt, expiresAt, openedAt, answeredAt, answerSeq, reason: declineReason ?? '' };
  return { ...base, state: stateOf(row, at) };
}

function stateOf({ outcome, withdrawnAt, expiresAt, openedAt }: InvitationRow, at: string): InvitationState {
  if (outcome !== null) return outcome;
  if (withdrawnAt !== null) return 'withdrawn';
  if (expiresAt <= at) return 'run-out';
  return openedAt === null ? 'waiting' : 'opened';
}
