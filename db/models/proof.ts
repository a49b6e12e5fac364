import 'server-only';
import { Table } from '../table';

export interface InvitationRow {
  id: string;
  logId: string;
  seq: number;
  machineId: string;
  email: string;
  tokenHash: string;
  invitedBy: string;
  message: string;
  createdAt: string;
  expiresAt: string;
  openedAt: string | null;
  remindedAt: string | null;
  withdrawnAt: string | null;
  answeredAt: string | null;
  answeredBy: string | null;
  shopId: string | null;
  outcome: 'countersigned' | 'declined' | null;
  declineReason: string | null;
  answerSeq: number | null;
}
export const invitations = new Table<InvitationRow>('invitations', ['id'], {
  id: 'text',
  logId: 'text',
  seq: 'integer',
  machineId: 'text',
  email: 'text',
  tokenHash: 'text',
  invitedBy: 'text',
  message: 'text',
  createdAt: 'text',
  expiresAt: 'text',
  openedAt: 'text',
  remindedAt: 'text',
  withdrawnAt: 'text',
  answeredAt: 'text',
  answeredBy: 'text',
  shopId: 'text',
  outcome: 'text',
  declineReason: 'text',
  answerSeq: 'integer',
});

export interface ViewingLinkRow {
  id: string;
  machineId: string;
  label: string;
  tokenHash: string;
  createdBy: string;
  createdAt: string;
  expiresAt: string | null;
  revokedAt: string | null;
  lastOpenedAt: string | null;
  timesOpened: number;
  packetId: string | null;
}
export const viewingLinks = new Table<ViewingLinkRow>('viewing_links', ['id'], {
  id: 'text',
  machineId: 'text',
  label: 'text',
  tokenHash: 'text',
  createdBy: 'text',
  createdAt: 'text',
  expiresAt: 'text',
  revokedAt: 'text',
  lastOpenedAt: 'text',
  timesOpened: 'integer',
  packetId: 'text',
});

export interface PacketRow {
  id: string;
  machineId: string;
  number: string;
  purpose: string;
  state: 'queued' | 'building' | 'ready' | 'failed';
  stage: string;
  progress: number;
  error: string | null;
  createdBy: string;
  createdAt: string;
  finishedAt: string | null;
  fileSha256: string | null;
  bytes: number | null;
  pages: number | null;
  logSize: number | null;
  linkId: string | null;
}
export const packets = new Table<PacketRow>('packets', ['id'], {
  id: 'text',
  machineId: 'text',
  number: 'text',
  purpose: 'text',
  state: 'text',
  stage: 'text',
  progress: 'integer',
  error: 'text',
  createdBy: 'text',
  createdAt: 'text',
  finishedAt: 'text',
  fileSha256: 'text',
  bytes: 'integer',
  pages: 'integer',
  logSize: 'integer',
  linkId: 'text',
});
