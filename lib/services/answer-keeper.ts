import 'server-only';
import { write } from '@/db/index';
import { findKeeper, updateKeeper } from '@/db/queries/checkpoint-keepers';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';
import { notFound, WitnessmarkError } from '@/lib/errors';
import { now } from '@/lib/ports/clock';
import { keeperByToken } from '@/lib/services/keeper-address';

export type KeeperState = 'asked' | 'keeping' | 'ended';

/** Where a keeper's link stands; null if there is no such link. Reading it changes nothing. */
export async function readKeeper(options: { token: string; address: string }): Promise<{ state: KeeperState } | null> {
  const keeper = await keeperByToken(options.token, options.address);
  if (keeper === null) return null;
  return { state: keeper.endedAt !== null ? 'ended' : keeper.confirmedAt === null ? 'asked' : 'keeping' };
}

/** The address wants the checkpoints that are sealed from now on. Saying so again changes nothing. */
export async function agreeToKeep(options: { token: string; address: string }): Promise<void> {
  const keeper = await keeperByToken(options.token, options.address);
  if (keeper === null) throw dead();
  await write(async (transaction) => {
    const current = await findKeeper(keeper.id, { transaction });
    if (current === null || current.endedAt !== null) throw dead();
    if (current.confirmedAt !== null) return;
    await updateKeeper(keeper.id, { confirmedAt: now().toISOString() }, transaction);
  });
}

/** No mail is sent to the address about this machine any more. Saying so again changes nothing. */
export async function stopKeeping(options: { token: string; address: string }): Promise<void> {
  const keeper = await keeperByToken(options.token, options.address);
  if (keeper === null) throw dead();
  await end(keeper.id);
}

/** The owner takes an address away. */
export async function removeKeeper(options: { person: PersonRow; id: string }): Promise<{ machineId: string }> {
  const keeper = await findKeeper(options.id);
  if (keeper === null) throw notFound('address');
  await authorise({ person: options.person, action: 'share', machine: keeper.machineId });
  await end(keeper.id);
  return { machineId: keeper.machineId };
}

async function end(id: string): Promise<void> {
  await write(async (transaction) => {
    const current = await findKeeper(id, { transaction });
    if (current?.endedAt === null) await updateKeeper(id, { endedAt: now().toISOString() }, transaction);
  });
}

const dead = () => new WitnessmarkError('gone', 'This link ended or never was. No mail is sent by it.');
