import 'server-only';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';
import { bundleRecord } from '@/lib/services/bundle-record';

/**
 * The record as it stands now, for an owner who compares an older file with it or keeps it. It opens what a packet
 * usually does: a signed record leaves the installation, so it is only handed to who may share it.
 */
export async function bundleForOwner(options: { person: PersonRow; machineId: string }): Promise<string> {
  const { person, machineId } = options;
  await authorise({ person, action: 'share', machine: machineId });
  const { text } = await bundleRecord({
    machineId,
    purpose: 'for the owner',
    number: `record ${machineId.slice(0, 8)}`,
  });
  return text;
}
