import 'server-only';
import { Table } from '../table';

export interface LogRow {
  id: string;
  subject: 'machine' | 'shelf';
  subjectId: string;
  origin: string;
  keyName: string;
  timesInjected: boolean;
  createdAt: string;
}
export const logs = new Table<LogRow>('logs', ['id'], {
  id: 'text',
  subject: 'text',
  subjectId: 'text',
  origin: 'text',
  keyName: 'text',
  timesInjected: 'flag',
  createdAt: 'text',
});

export interface EntryRow {
  logId: string;
  seq: number;
  kind: string;
  sealedAt: string;
  leafHash: string;
  previous: string | null;
  refersToSeq: number | null;
  leaf: string;
  sealedBy: string;
  idempotencyKey: string;
}
export const entries = new Table<EntryRow>('entries', ['logId', 'seq'], {
  logId: 'text',
  seq: 'integer',
  kind: 'text',
  sealedAt: 'text',
  leafHash: 'text',
  previous: 'text',
  refersToSeq: 'integer',
  leaf: 'text',
  sealedBy: 'text',
  idempotencyKey: 'text',
});

export interface EntryPartRow {
  logId: string;
  seq: number;
  name: string;
  disclosure: string;
}
export const entryParts = new Table<EntryPartRow>('entry_parts', ['logId', 'seq', 'name'], {
  logId: 'text',
  seq: 'integer',
  name: 'text',
  disclosure: 'text',
});

export interface CheckpointRow {
  logId: string;
  size: number;
  root: string;
  note: string;
  tree: string;
  createdAt: string;
}
export const checkpoints = new Table<CheckpointRow>('checkpoints', ['logId', 'size'], {
  logId: 'text',
  size: 'integer',
  root: 'text',
  note: 'text',
  tree: 'text',
  createdAt: 'text',
});

export interface TokenRow {
  logId: string;
  size: number;
  sha256: string;
  authority: string;
  genTime: string;
  token: string;
  isOwnAuthority: boolean;
  createdAt: string;
}
export const tokens = new Table<TokenRow>('tokens', ['logId', 'size', 'sha256'], {
  logId: 'text',
  size: 'integer',
  sha256: 'text',
  authority: 'text',
  genTime: 'text',
  token: 'text',
  isOwnAuthority: 'flag',
  createdAt: 'text',
});

export interface StampJobRow {
  logId: string;
  size: number;
  authority: string;
  attempts: number;
  nextTryAt: string;
  lastError: string | null;
  doneAt: string | null;
}
export const stampJobs = new Table<StampJobRow>('stamp_jobs', ['logId', 'size', 'authority'], {
  logId: 'text',
  size: 'integer',
  authority: 'text',
  attempts: 'integer',
  nextTryAt: 'text',
  lastError: 'text',
  doneAt: 'text',
});

export interface DrawRow {
  shelfLog: string;
  purchaseSeq: number;
  line: number;
  machineLog: string;
  entrySeq: number;
  position: number;
  amount: string;
  unit: string;
  drawnOn: string;
}
export const draws = new Table<DrawRow>('draws', ['machineLog', 'entrySeq', 'position'], {
  shelfLog: 'text',
  purchaseSeq: 'integer',
  line: 'integer',
  machineLog: 'text',
  entrySeq: 'integer',
  position: 'integer',
  amount: 'text',
  unit: 'text',
  drawnOn: 'text',
});

/** A part that was destroyed for good; `recordedSeq` is the entry of the same log that says so. */
export interface ErasureRow {
  logId: string;
  seq: number;
  name: string;
  erasedAt: string;
  erasedBy: string;
  recordedSeq: number;
}
export const erasures = new Table<ErasureRow>('erasures', ['logId', 'seq', 'name'], {
  logId: 'text',
  seq: 'integer',
  name: 'text',
  erasedAt: 'text',
  erasedBy: 'text',
  recordedSeq: 'integer',
});
