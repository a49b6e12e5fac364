import type { ReactNode } from 'react';
import { RiderShell } from '@/components/machine/rider-shell';
import { requirePerson } from '@/lib/auth/session';
import { shellOf } from '@/lib/services/read-shell';

/** The steward's pages. The layout only frames: it is not asked again between pages, so each page guards itself. */
export default async function StewardLayout({ children }: { children: ReactNode }) {
  return <RiderShell {...await shellOf(await requirePerson())}>{children}</RiderShell>;
}
