import 'server-only';
import { Op } from 'sequelize';
import type { Transaction } from '../index';
import { invitations, type InvitationRow } from '../models/proof';

export type { InvitationRow };

interface Within {
  transaction?: Transaction;
}

export const findInvitation = (id: string, within: Within = {}) => invitations.find({ id }, within);
export const findInvitationByTokenHash = (tokenHash: string) => invitations.find({ tokenHash });

export const invitationsOfEntry = (logId: string, seq: number, within: Within = {}) =>
  invitations.all({ logId, seq }, { order: [['createdAt', 'DESC']], ...within });

export const invitationsOfMachine = (machineId: string) =>
  invitations.all({ machineId }, { order: [['createdAt', 'DESC']] });

/** How many invitations a person has sent since an instant. */
export const countInvitationsBy = (personId: string, since: string) =>
  invitations.count({ invitedBy: personId, createdAt: { [Op.gt]: since } });

/** Everything a shop's technician has been asked at this address, newest first. */
export const invitationsToEmail = (email: string) =>
  invitations.all({ email }, { order: [['createdAt', 'DESC']], limit: 200 });

export const insertInvitation = (row: InvitationRow, transaction: Transaction) =>
  invitations.insert(row, { transaction });

export const updateInvitation = (id: string, values: Partial<InvitationRow>, transaction: Transaction) =>
  invitations.update({ id }, values, { transaction });
