import 'server-only';
import { shopOf } from '@/db/queries/shops';
import { shelvesOf } from '@/db/queries/shelves';
import type { PersonRow } from '@/db/models/people';
import { env } from '@/lib/env';
import { listMachines } from './list-machines';

export interface ShellData {
  machines: { id: string; name: string }[];
  /** The person's first shelf. */
  shelf: string | undefined;
  /** `shop`: the one the person answers for. */
  person: { name: string; isSteward: boolean; shop: string | undefined };
  demo: 'none' | 'demo' | 'demo-times-injected';
}

/** What stands around every page of a rider. */
export async function shellOf(person: PersonRow): Promise<ShellData> {
  const machines = await listMachines(person);
  const [shelf] = await shelvesOf(person.id);
  const shop = await shopOf(person.id);
  const isInjected = machines.some((machine) => machine.timesInjected);
  return {
    machines: machines.map(({ id, name }) => ({ id, name })),
    shelf: shelf?.id,
    person: { name: person.name, isSteward: person.isSteward, shop: shop?.id },
    demo: isInjected ? 'demo-times-injected' : env.isDemo ? 'demo' : 'none',
  };
}
