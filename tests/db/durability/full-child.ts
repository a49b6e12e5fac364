import { randomBytes } from 'node:crypto';
import { existsSync, rmSync, statfsSync, writeFileSync, appendFileSync } from 'node:fs';
import path from 'node:path';
import { closeDatabase, prepareDatabase } from '@/db/index';
import { asRefusal } from '@/lib/auth/refusal';
import { env } from '@/lib/env';
import { putBlob } from '@/lib/ports/blob-store';
import { appendEntry } from '@/lib/services/append-entry';
import { checkRecords } from '@/lib/services/check-records';
import { stampingSettled } from '@/lib/services/stamp-checkpoints';

// Run on a file system that is too small: fills it, seals until that is refused, makes room, and seals again.
const [rider = '', log = ''] = process.argv.slice(2);
const ballast = path.join(env.dataFolder, 'ballast');
// The refusals are written to the server's log, and Sequelize says that it gives a connection up.
console.error = console.warn = () => undefined;

const seal = (key: string) =>
  appendEntry({
    log,
    kind: 'reading',
    by: rider,
    idempotencyKey: key,
    parts: async () => ({ body: { on: '2026-04-18', note: randomBytes(2_000).toString('hex') } }),
  });

/** Leaves `room` bytes. */
function fill(room: number): void {
  writeFileSync(ballast, '');
  const { bavail, bsize } = statfsSync(env.dataFolder);
  appendFileSync(ballast, Buffer.alloc(Math.max(0, bavail * bsize - room)));
}

async function main(): Promise<void> {
  await prepareDatabase();
  fill(16_000);
  const fileRefused = await putBlob(randomBytes(200_000)).then(
    () => 'kept',
    (error: unknown) => asRefusal(error).code,
  );
  rmSync(ballast);
  fill(400_000);
  let acknowledged = 0;
  let sealRefused = '';
  while (sealRefused === '' && acknowledged < 1_000) {
    try {
      await seal(`full/${acknowledged}`);
      acknowledged += 1;
    } catch (error) {
      sealRefused = asRefusal(error).code;
    }
  }
  rmSync(ballast);
  const { seq } = await seal(`full/${acknowledged}`);
  await stampingSettled();
  const { problems } = await checkRecords();
  await closeDatabase();
  process.stdout.write(JSON.stringify({ acknowledged, fileRefused, sealRefused, after: seq + 1, problems }));
  if (existsSync(ballast)) process.exitCode = 1;
}

main().catch((error: unknown) => {
  process.stderr.write(String((error as Error).stack ?? error));
  process.exitCode = 1;
});
