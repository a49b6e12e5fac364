import type { ReactNode } from 'react';
import { RiderShell } from '@/components/machine/rider-shell';
import { requirePerson } from '@/lib/auth/session';
import { shellOf } from '@/lib/services/read-shell';

/** The rider's pages: somebody signed in, in the shell with their machines. Each page guards its own object. */
export default async function RiderLayout({ children }: { children: ReactNode }) {
  return <RiderShell {...await shellOf(await requirePerson())}>{children}</RiderShell>;
}
