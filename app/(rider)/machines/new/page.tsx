import type { Metadata } from 'next';
import { randomUUID } from 'node:crypto';
import { MachineForm } from '@/components/machine/machine-form';
import { PageHead } from '@/components/ui/page-head';
import { requirePerson } from '@/lib/auth/session';
import { machineKinds } from '@/lib/services/machine-kinds';
import { setUpMachine } from './actions';

export const metadata: Metadata = { title: 'Set up a machine' };

export default async function NewMachinePage() {
  const person = await requirePerson();
  return (
    <>
      <PageHead
        title="Set up a machine"
        note="This becomes entry 0 of its record. An entry is never edited; what turns out wrong is put right by an addendum."
      />
      <MachineForm
        action={setUpMachine}
        machine={randomUUID()}
        kinds={machineKinds.map(({ kind, title }) => ({ value: kind, label: title }))}
        zones={[...new Set(['UTC', person.timeZone, ...Intl.supportedValuesOf('timeZone')])]}
        person={{ timeZone: person.timeZone, distanceUnit: person.distanceUnit }}
      />
    </>
  );
}
