import { parseArgs } from 'node:util';
import { closeDatabase, prepareDatabase } from '@/db/index';
import { rotateKey } from '@/lib/services/rotate-key';

// `npm run rotate-key`, with or without a running server. `-- --old-key-is-lost` if the key file cannot be put back.
const { values } = parseArgs({ options: { 'old-key-is-lost': { type: 'boolean', default: false } } });
try {
  await prepareDatabase();
  const { verifierKey, fingerprint, before } = await rotateKey({ isOldKeyLost: values['old-key-is-lost'] });
  console.log(`New key, published as\n  ${verifierKey}\nfingerprint\n  ${fingerprint}`);
  if (before !== null) console.log(`The key before it stays published:\n  ${before}`);
  console.log(
    'A running server signs its next seal with the new key. The old private key is gone from the data folder; older ' +
      'backups still hold it, so keep them as safe as before. Make a backup now: npm run backup -- --to FOLDER',
  );
} catch (error) {
  console.error(error instanceof Error ? error.message : error);
  process.exitCode = 1;
}
await closeDatabase();
