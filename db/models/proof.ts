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
  /** What it opens, as JSON (lib/domain/scope.ts); null: everything but prices. */
  scope: string | null;
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
  scope: 'text',
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
  /** What it opens, as JSON (lib/domain/scope.ts); null: everything but prices. */
  scope: string | null;
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
  scope: 'text',
});

/** A person's own key in an authenticator, with which statements are signed outside the server. */
export interface PasskeyRow {
  id: string;
  personId: string;
  /** base64url, as the authenticator names it. */
  credentialId: string;
  /** SPKI, base64url: what a `key` entry seals. */
  publicKey: string;
  /** COSE key, base64url, as the registration gave it. */
  coseKey: string;
  signCount: number;
  rpId: string;
  name: string;
  /** JSON list of WebAuthn transports. */
  transports: string;
  createdAt: string;
  lastUsedAt: string | null;
  revokedAt: string | null;
}
export const passkeys = new Table<PasskeyRow>('passkeys', ['id'], {
  id: 'text',
  personId: 'text',
  credentialId: 'text',
  publicKey: 'text',
  coseKey: 'text',
  signCount: 'integer',
  rpId: 'text',
  name: 'text',
  transports: 'text',
  createdAt: 'text',
  lastUsedAt: 'text',
  revokedAt: 'text',
});

export interface PasskeyChallengeRow {
  id: string;
  personId: string;
  /** base64url. */
  challenge: string;
  /** JSON: what it is for. */
  detail: string;
  createdAt: string;
  expiresAt: string;
  usedAt: string | null;
}
export const passkeyChallenges = new Table<PasskeyChallengeRow>('passkey_challenges', ['id'], {
  id: 'text',
  personId: 'text',
  challenge: 'text',
  detail: 'text',
  createdAt: 'text',
  expiresAt: 'text',
  usedAt: 'text',
});

/** An address that is mailed each new checkpoint of a machine's log, once it said that it wants to be. */
export interface CheckpointKeeperRow {
  id: string;
  machineId: string;
  email: string;
  tokenHash: string;
  addedBy: string;
  addedAt: string;
  confirmedAt: string | null;
  endedAt: string | null;
}
export const checkpointKeepers = new Table<CheckpointKeeperRow>('checkpoint_keepers', ['id'], {
  id: 'text',
  machineId: 'text',
  email: 'text',
  tokenHash: 'text',
  addedBy: 'text',
  addedAt: 'text',
  confirmedAt: 'text',
  endedAt: 'text',
});

export interface CheckpointMailRow {
  keeperId: string;
  logId: string;
  size: number;
  attempts: number;
  nextTryAt: string;
  lastError: string | null;
  sentAt: string | null;
}
export const checkpointMails = new Table<CheckpointMailRow>('checkpoint_mails', ['keeperId', 'logId', 'size'], {
  keeperId: 'text',
  logId: 'text',
  size: 'integer',
  attempts: 'integer',
  nextTryAt: 'text',
  lastError: 'text',
  sentAt: 'text',
});

/** A record exported elsewhere and kept here to be read; it is never continued. */
export interface ImportedRecordRow {
  id: string;
  personId: string;
  name: string;
  number: string;
  madeAt: string;
  logId: string;
  size: number;
  root: string;
  outcome: string;
  fileSha256: string;
  bytes: number;
  importedAt: string;
  removedAt: string | null;
}
export const importedRecords = new Table<ImportedRecordRow>('imported_records', ['id'], {
  id: 'text',
  personId: 'text',
  name: 'text',
  number: 'text',
  madeAt: 'text',
  logId: 'text',
  size: 'integer',
  root: 'text',
  outcome: 'text',
  fileSha256: 'text',
  bytes: 'integer',
  importedAt: 'text',
  removedAt: 'text',
});
