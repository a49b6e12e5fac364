import 'server-only';
import { Table } from '../table';

export interface PersonRow {
  id: string;
  email: string;
  name: string;
  passwordHash: string;
  emailConfirmedAt: string | null;
  isSteward: boolean;
  distanceUnit: string;
  volumeUnit: string;
  torqueUnit: string;
  timeZone: string;
  createdAt: string;
}
export const people = new Table<PersonRow>('people', ['id'], {
  id: 'text',
  email: 'text',
  name: 'text',
  passwordHash: 'text',
  emailConfirmedAt: 'text',
  isSteward: 'flag',
  distanceUnit: 'text',
  volumeUnit: 'text',
  torqueUnit: 'text',
  timeZone: 'text',
  createdAt: 'text',
});

export interface SessionRow {
  id: string;
  personId: string;
  createdAt: string;
  lastSeenAt: string;
  expiresAt: string;
  endedAt: string | null;
  device: string;
}
export const sessions = new Table<SessionRow>('sessions', ['id'], {
  id: 'text',
  personId: 'text',
  createdAt: 'text',
  lastSeenAt: 'text',
  expiresAt: 'text',
  endedAt: 'text',
  device: 'text',
});

export interface MailTokenRow {
  tokenHash: string;
  purpose: string;
  personId: string;
  detail: string | null;
  createdAt: string;
  expiresAt: string;
  usedAt: string | null;
}
export const mailTokens = new Table<MailTokenRow>('mail_tokens', ['tokenHash'], {
  tokenHash: 'text',
  purpose: 'text',
  personId: 'text',
  detail: 'text',
  createdAt: 'text',
  expiresAt: 'text',
  usedAt: 'text',
});

export interface AttemptRow {
  key: string;
  at: string;
}
export const attempts = new Table<AttemptRow>('attempts', [], {
  key: 'text',
  at: 'text',
});

export interface RelationRow {
  id: string;
  personId: string;
  subjectKind: 'machine' | 'shelf' | 'shop';
  subjectId: string;
  relation: 'owner' | 'helper' | 'technician';
  since: string;
  until: string | null;
}
export const relations = new Table<RelationRow>('relations', ['id'], {
  id: 'text',
  personId: 'text',
  subjectKind: 'text',
  subjectId: 'text',
  relation: 'text',
  since: 'text',
  until: 'text',
});
