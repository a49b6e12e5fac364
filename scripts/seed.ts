import { closeDatabase, prepareDatabase } from '@/db/index';
import { migrate } from '@/db/migrate';
import { demoAccounts } from '@/db/seed/demo-accounts';
import { isSeeded, seedDemo } from '@/db/seed/seed-demo';
import { env } from '@/lib/env';

// `npm run seed`: brings the schema up to date and tells the demo's story, once. `--sign-ins` only prints who may sign in.
const isLoopback = /^https?:\/\/(localhost|127\.0\.0\.1|\[::1\])(:|$)/.test(env.url);

async function seed(): Promise<void> {
  if (!env.isDemo)
    throw new Error(`Only an installation of the origin demo.example is seeded; this one is ${env.origin}.`);
  if (!isLoopback) throw new Error(`Demo accounts have public passwords: never on ${env.url}, only on localhost.`);
  await prepareDatabase();
  await migrate();
  if (await isSeeded()) return;
  console.log('\n> Telling the demo: three years of riding (a minute or two)');
  await seedDemo((done, of) => process.stdout.write(`\r  ${done} of ${of} events`));
  process.stdout.write('\n');
}

function printSignIns(): void {
  console.log('\nDemo, times injected. Sign in as');
  for (const { role, email, password } of demoAccounts)
    console.log(`  ${role.padEnd(8)} ${email.padEnd(32)} ${password}`);
}

if (process.argv.includes('--sign-ins')) printSignIns();
else await seed();
await closeDatabase();
