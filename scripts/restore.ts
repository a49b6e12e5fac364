import { parseArgs } from 'node:util';
import { closeDatabase } from '@/db/index';
import { restore } from '@/lib/services/back-up';

// `npm run restore -- --from FOLDER`, into an empty data folder, while no server runs on it.
const { from } = parseArgs({ options: { from: { type: 'string' } } }).values;
if (from === undefined) {
  console.error('Say where from: npm run restore -- --from FOLDER');
  process.exitCode = 2;
} else {
  const { copied, entries } = await restore({ from });
  console.log(`${copied} files restored, ${entries} entries in the database, and SQLite finds it sound.`);
}
await closeDatabase();
