import type { ReactNode } from 'react';
import { RiderShell } from '@/components/machine/rider-shell';
import { requirePerson } from '@/lib/auth/session';
import { shellOf } from '@/lib/services/read-shell';

/** The rider's pages: somebody signed in, in the shell with their machines. Each page guards its own object. */
export default async function RiderLayout({ children }: { children: ReactNode }) {
  const person = await requirePerson();
  const { machines, shelf, shop, demo } = await shellOf(person);
  return (
    <RiderShell
      machines={machines}
      shelf={shelf}
      person={{ name: person.name, isSteward: person.isSteward, shop }}
      demo={demo}
    >
      {children}
    </RiderShell>
  );
}
