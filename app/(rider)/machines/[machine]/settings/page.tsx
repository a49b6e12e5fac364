import type { Metadata } from 'next';
import { MachineFacts, PeopleFacts, RecordFacts, WarrantyFacts } from '@/components/machine/machine-facts';
import { LinkButton } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { paths } from '@/lib/paths';
import { readMachineSettings } from '@/lib/services/read-machine-settings';

export const metadata: Metadata = { title: 'Identity and people' };

export default async function MachineSettingsPage({ params }: { params: Promise<{ machine: string }> }) {
  const { machine: id } = await params;
  const person = await requirePerson();
  const settings = await orNotFound(readMachineSettings({ person, machine: id }));
  return (
    <>
      <PageHead
        label="Identity and people"
        title={<UserText>{settings.machine.name}</UserText>}
        actions={<LinkButton href={paths.specSheet(id)}>Spec sheet</LinkButton>}
      />
      <div className="grid gap-8">
        <MachineFacts settings={settings} />
        <WarrantyFacts settings={settings} />
        <PeopleFacts settings={settings} />
        <RecordFacts settings={settings} />
      </div>
    </>
  );
}
