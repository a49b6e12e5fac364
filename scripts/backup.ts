import { parseArgs } from 'node:util';
import { closeDatabase } from '@/db/index';
import { backUp } from '@/lib/services/back-up';

// `npm run backup -- --to FOLDER`, while the server runs.
const { to } = parseArgs({ options: { to: { type: 'string' } } }).values;
if (to === undefined) {
  console.error('Say where to: npm run backup -- --to FOLDER');
  process.exitCode = 2;
} else {
  const { copied } = await backUp({ to });
  console.log(`${copied} files copied to ${to}. It holds the signing key: keep it where only you can read it.`);
}
await closeDatabase();
