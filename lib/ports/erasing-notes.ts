import 'server-only';
import { mkdir, open, readFile, readdir, rm } from 'node:fs/promises';
import path from 'node:path';
import { env } from '@/lib/env';

/**
 * What an erasure still has to take off the disk once its transaction has committed, noted before it commits: if the
 * server stops in between, the next start goes on from here. Holds hashes only.
 */
export interface ErasingNote {
  id: string;
  /** Hex SHA-256 of files that may have to go. */
  files: string[];
}

const folder = () => path.join(env.dataFolder, 'erasing');
const fileOf = (id: string) => path.join(folder(), `${id}.json`);

export async function noteErasing({ id, files }: ErasingNote): Promise<void> {
  await mkdir(folder(), { recursive: true, mode: 0o700 });
  const file = await open(fileOf(id), 'wx', 0o600);
  try {
    await file.writeFile(JSON.stringify(files));
    await file.sync();
  } finally {
    await file.close();
  }
  const parent = await open(folder(), 'r');
  await parent.sync();
  await parent.close();
}

export async function erasingNotes(): Promise<ErasingNote[]> {
  const names = await readdir(folder()).catch((error: NodeJS.ErrnoException) => {
    if (error.code === 'ENOENT') return [];
    throw error;
  });
  return Promise.all(
    names.map(async (name) => {
      const id = name.replace(/\.json$/, '');
      // One cut short was never followed by a commit: there is nothing to take away.
      const files: unknown = await readFile(fileOf(id), 'utf8')
        .then(JSON.parse)
        .catch(() => []);
      return { id, files: Array.isArray(files) ? files.filter((one) => typeof one === 'string') : [] };
    }),
  );
}

export const forgetErasing = ({ id }: ErasingNote): Promise<void> => rm(fileOf(id), { force: true });
