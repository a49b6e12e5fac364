import { randomUUID } from 'node:crypto';
import { mkdtempSync, rmSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';

// `npm run bench`: how cost grows on this machine. Works in a folder of its own and removes it.
const folder = mkdtempSync(path.join(os.tmpdir(), 'witnessmark-bench-'));
process.env.WITNESSMARK_DATA = folder;

const { closeDatabase, prepareDatabase } = await import('@/db/index');
const { migrate } = await import('@/db/migrate');
const { buildPerson } = await import('@/db/seed/build-person');
const { insertMachine } = await import('@/db/queries/machines');
const { emptyTerms } = await import('@/lib/domain/presets');
const { verifyBundle } = await import('@/lib/evidence/verify');
const { appendEntry } = await import('@/lib/services/append-entry');
const { bundleRecord } = await import('@/lib/services/bundle-record');
const { openLog } = await import('@/lib/services/open-log');
const { readRecord } = await import('@/lib/services/read-record');
const { stampingSettled } = await import('@/lib/services/stamp-checkpoints');

const sizes = [10, 100, 1000];

function milliseconds(from: bigint): number {
  return Number(process.hrtime.bigint() - from) / 1e6;
}

async function timed<T>(what: string, work: () => Promise<T> | T): Promise<T> {
  const from = process.hrtime.bigint();
  const result = await work();
  console.log(`${what.padEnd(48)} ${milliseconds(from).toFixed(0).padStart(8)} ms`);
  return result;
}

await prepareDatabase();
await migrate();
const person = await buildPerson({
  email: 'bench@witnessmark.example',
  name: 'Bench',
  password: 'a bench has no secrets',
});
const author = { person: person.id, name: person.name, role: 'owner' as const };

for (const size of sizes) {
  const machine = randomUUID();
  const at = new Date().toISOString();
  const { log } = await openLog({
    subject: 'machine',
    subjectId: machine,
    by: person.id,
    parts: () =>
      Promise.resolve({
        author,
        body: {
          make: 'Corvane',
          model: 'Bench',
          kindOfMachine: 'other',
          recordStarts: { on: '2026-01-01', why: 'new' },
        },
      }),
    within: (transaction) =>
      insertMachine(
        {
          id: machine, make: 'Corvane', model: 'Bench', modelYear: null, kind: 'other', vin: null, frameNumber: null,
          engineNumber: null, vinCheck: 'not checked', distanceUnit: 'km', timeZone: 'UTC', firstUseOn: null,
          firstUseOdometer: null, archivedAt: null, createdBy: person.id, createdAt: at,
        },
        { id: randomUUID(), personId: person.id, subjectKind: 'machine', subjectId: machine, relation: 'owner', since: at, until: null },
        transaction,
      ), // prettier-ignore
  });
  await timed(`seal ${size} entries, one after another`, async () => {
    for (let i = 1; i < size; i += 1) {
      await appendEntry({
        log,
        kind: 'terms',
        by: person.id,
        idempotencyKey: randomUUID(),
        parts: () => Promise.resolve({ author, body: emptyTerms() }),
      });
    }
  });
  await timed(`wait until ${size} checkpoints are stamped`, () => stampingSettled());
  await timed(`read a record of ${size} entries`, () => readRecord({ machineId: machine }));
  const { text } = await timed(`bundle ${size} entries`, () =>
    bundleRecord({ machineId: machine, purpose: 'bench', number: 'WM-BENCH' }),
  );
  const finding = await timed(`verify ${size} entries (${(text.length / 1e6).toFixed(2)} MB)`, () =>
    verifyBundle({ bundleText: text }),
  );
  console.log(`${''.padEnd(48)} ${finding.outcome}\n`);
}
console.log(`memory at the end: ${(process.memoryUsage().rss / 1e6).toFixed(0)} MB`);
await closeDatabase();
rmSync(folder, { recursive: true });
