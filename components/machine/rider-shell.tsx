'use client';

import { usePathname } from 'next/navigation';
import { useState, type ReactNode } from 'react';
import { AppShell, type AppShellProps, type Place } from '@/components/shell/app-shell';

const placesByStep: Record<string, Place> = {
  record: 'record',
  schedule: 'schedule',
  'spec-sheet': 'spec-sheet',
  settings: 'spec-sheet',
  proof: 'proof',
};

function placeOf(steps: string[]): Place | undefined {
  const [first, second, third] = steps;
  if (first === 'machines') return second === 'new' ? undefined : third === undefined ? 'bench' : placesByStep[third];
  if (first === 'shelves') return 'shelf';
  if (first === 'shops') return 'shop';
  if (first === 'worksheets') return 'worksheet';
  if (first === 'account') return 'account';
  return first === 'steward' ? 'steward' : undefined;
}

type RiderShellProps = Pick<AppShellProps, 'machines' | 'shelf' | 'person' | 'demo'> & { children: ReactNode };

/**
 * The shell that knows where it is. A layout stays when its pages change, so the place is read from the address here;
 * pages of no machine keep the machine that was shown last.
 */
export function RiderShell({ machines, children, ...rest }: RiderShellProps) {
  const steps = usePathname().split('/').filter(Boolean);
  const named = steps[0] === 'machines' ? machines.find(({ id }) => id === steps[1]) : undefined;
  const [last, setLast] = useState(machines[0]);
  if (named !== undefined && named.id !== last?.id) setLast(named);
  const machine = named ?? last ?? machines[0];
  return (
    <AppShell {...rest} machine={machine} machines={machines} current={placeOf(steps)}>
      {children}
    </AppShell>
  );
}
