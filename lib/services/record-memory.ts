import 'server-only';
import { env } from '@/lib/env';
import { paths } from '@/lib/paths';
import { readCheckpoint } from '@/lib/services/read-checkpoint';

/**
 * The lines every mail about a record ends with: how long the record is and its root, so that whoever keeps the mail
 * can tell later whether the record was rewritten.
 */
export async function recordMemory(logId: string): Promise<string> {
  const { size, root, fingerprint } = await readCheckpoint(logId);
  return [
    'Keep this mail. It remembers the record as it stands now:',
    `entries ${size}`,
    `root ${root}`,
    `key fingerprint ${fingerprint}`,
    `How to check it: ${env.url}${paths.method}`,
  ].join('\n');
}
