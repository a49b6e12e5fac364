import type { Metadata } from 'next';
import { notFound } from 'next/navigation';
import { seqFrom } from '@/app/(rider)/seq-from';
import { AddendumForm } from '@/components/entry/addendum-form';
import { LinkButton } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { paths } from '@/lib/paths';
import { findOpenAddendum } from '@/lib/services/find-open-addendum';
import { readMachineRecord } from '@/lib/services/read-machine-record';
import { sealAddendumAction } from './actions';

export const metadata: Metadata = { title: 'Add to an entry' };

export default async function AddendumPage({ params }: { params: Promise<{ machine: string; seq: string }> }) {
  const { machine, seq: asked } = await params;
  const person = await requirePerson();
  const seq = seqFrom(asked);
  const { record, relation } = await orNotFound(readMachineRecord({ person, machine }));
  const entry = record.entries[seq];
  if (entry === undefined) notFound();
  const open = await orNotFound(findOpenAddendum({ person, machine, seq }));
  const isOpening = entry.kind === 'opening';
  return (
    <>
      <PageHead
        label={<UserText>{`${record.machine.name}, entry ${seq}: ${entry.title}`}</UserText>}
        title={isOpening ? 'Correct or add a detail' : `Add to entry ${seq}`}
        note={
          isOpening
            ? 'Say which detail is wrong and what is right. The opening stays as it was sealed; readers see both.'
            : 'An addendum is an entry of its own, shown under the one it adds to. That one stays as it was sealed.'
        }
        actions={<LinkButton href={paths.entry(machine, seq)}>Back to the entry</LinkButton>}
      />
      <AddendumForm
        action={sealAddendumAction}
        machine={machine}
        seq={seq}
        draft={open?.id}
        mayISeal={relation === 'owner'}
      />
    </>
  );
}
