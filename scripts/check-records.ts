import { closeDatabase } from '@/db/index';
import { type CheckProgress, checkRecords } from '@/lib/services/check-records';

// `npm run check-records`, while the server runs or not. Changes nothing. Exit status 1 if anything is wrong.
const words = { database: 'the database file', records: 'entries', files: 'files' } as const;
let told = 0;
function tell({ stage, done, of }: CheckProgress): void {
  const isLast = done === of;
  if (!process.stderr.isTTY || (!isLast && Date.now() - told < 200)) return;
  told = Date.now();
  process.stderr.write(`\r${words[stage]}: ${done} of ${of}  ${isLast && stage !== 'database' ? '\n' : ''}`);
}

const check = await checkRecords({ onProgress: tell });
for (const { log, seq, part, sentence, technical } of check.problems) {
  const where = [log, seq === undefined ? undefined : `entry ${seq}`, part].filter((word) => word !== undefined);
  console.log(`${where.length === 0 ? 'store' : where.join(', ')}: ${sentence}\n    ${technical}`);
}
const { logs, entries, files, bytes, problemCount, problems } = check;
if (problemCount > problems.length) console.log(`and ${problemCount - problems.length} more`);
console.log(`${entries} entries of ${logs} logs and ${files} files (${(bytes / 1e6).toFixed(1)} MB) were checked.`);
console.log(problemCount === 0 ? 'Everything is as it was sealed.' : `${problemCount} things are not as sealed.`);
process.exitCode = problemCount === 0 ? 0 : 1;
await closeDatabase();
