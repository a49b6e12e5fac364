import type { ReactNode } from 'react';
import { RiderShell } from '@/components/machine/rider-shell';
import { requirePerson } from '@/lib/auth/session';
import { shellOf } from '@/lib/services/read-shell';

/** The steward's pages. The layout only frames: it is not asked again between pages, so each page guards itself. */
export default async function StewardLayout({ children }: { children: ReactNode }) {
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
