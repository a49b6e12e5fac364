import { CheckpointKeepers } from '@/components/proof/checkpoint-keepers';
import { requirePerson } from '@/lib/auth/session';
import { listKeepers } from '@/lib/services/list-keepers';
import { askKeeperAction, removeKeeperAction } from './keeper-actions';

/** The part of the page about who keeps checkpoints, with what it reads and does. */
export async function Keepers({ machine, zone }: { machine: string; zone: string }) {
  const keepers = await listKeepers({ person: await requirePerson(), machineId: machine });
  return (
    <CheckpointKeepers
      machine={machine}
      keepers={keepers}
      zone={zone}
      ask={askKeeperAction}
      remove={removeKeeperAction}
    />
  );
}
