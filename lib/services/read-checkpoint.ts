import 'server-only';
import { findLog, lastCheckpoint } from '@/db/queries/logs';
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

/** The newest signed checkpoint of a log. It is public: size and root say nothing about what was done. */
export async function readCheckpoint(logId: string): Promise<CheckpointView> {
  const [log, checkpoint] = await Promise.all([findLog(logId), lastCheckpoint(logId)]);
  if (log === null || checkpoint === null) throw notFound('record');
  const { size, root, note } = checkpoint;
  return { log: log.id, origin: log.origin, size, root, note, ...keyOfNote(note) };
}
