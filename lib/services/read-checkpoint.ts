import 'server-only';
import { findCheckpoint, findLog, lastCheckpoint } from '@/db/queries/logs';
import { notFound } from '@/lib/errors';
import { keyOfNote } from '@/lib/services/log-keys';

export interface CheckpointView {
  log: string;
  origin: string;
  size: number;
  /** Base64. */
  root: string;
  /** The signed note. */
  note: string;
  verifierKey: string;
  fingerprint: string;
}

/**
 * A signed checkpoint of a log: the newest, or the one it had at a size. It is public: size and root say nothing about
 * what was done, and with an older one anybody compares the note they kept.
 */
export async function readCheckpoint(logId: string, at: { size?: number } = {}): Promise<CheckpointView> {
  const [log, checkpoint] = await Promise.all([
    findLog(logId),
    at.size === undefined ? lastCheckpoint(logId) : findCheckpoint(logId, at.size),
  ]);
  if (log === null) throw notFound('record');
  if (checkpoint === null) throw notFound(at.size === undefined ? 'record' : 'checkpoint');
  const { size, root, note } = checkpoint;
  return { log: log.id, origin: log.origin, size, root, note, ...keyOfNote(note) };
}
