import { copyFile } from 'node:fs/promises';
import path from 'node:path';
import { parseArgs } from 'node:util';
import { closeDatabase, prepareDatabase } from '@/db/index';
import { migrate } from '@/db/migrate';
import { findPacket, ownerOfMachine } from '@/db/queries/packets';
import { buildPacket, packetFile } from '@/lib/services/build-packet';
import { queuePacket } from '@/lib/services/request-packet';

const usage = 'npm run packet -- --machine ID --out FILE [--purpose TEXT]';

/** Builds a packet without the server: for whoever runs the installation. */
async function main(): Promise<number> {
  const { values } = parseArgs({
    options: { machine: { type: 'string' }, out: { type: 'string' }, purpose: { type: 'string', default: '' } },
  });
  if (values.machine === undefined || values.out === undefined) {
    console.error(usage);
    return 2;
  }
  await prepareDatabase();
  await migrate();
  const owner = await ownerOfMachine(values.machine);
  if (owner === null) {
    console.error(`There is no machine ${values.machine} with an owner.`);
    return 1;
  }
  const queued = await queuePacket({ machineId: values.machine, by: owner, purpose: values.purpose });
  await buildPacket(queued);
  const packet = await findPacket(queued.id);
  if (packet?.state !== 'ready') {
    console.error(packet?.error ?? 'The packet could not be built.');
    return 1;
  }
  await copyFile(packetFile(packet.number), path.resolve(values.out));
  console.log(`Packet ${packet.number}: ${packet.pages} pages, ${packet.bytes} bytes, in ${values.out}`);
  return 0;
}

try {
  process.exitCode = await main();
} catch (error) {
  console.error(error instanceof Error ? error.message : error);
  process.exitCode = 1;
} finally {
  await closeDatabase();
}
