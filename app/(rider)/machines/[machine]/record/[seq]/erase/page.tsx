import { randomUUID } from 'node:crypto';
import type { Metadata } from 'next';
import { seqFrom } from '@/app/(rider)/seq-from';
import { EraseForm } from '@/components/entry/erase-form';
import { EraseReach } from '@/components/entry/erase-reach';
import { LinkButton } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { paths } from '@/lib/paths';
import { previewErasure } from '@/lib/services/preview-erasure';
import { readMachineRecord } from '@/lib/services/read-machine-record';
import { eraseAction } from './actions';

export const metadata: Metadata = { title: 'Erase a part of an entry' };

export default async function ErasePage({ params }: { params: Promise<{ machine: string; seq: string }> }) {
  const { machine, seq: asked } = await params;
  const person = await requirePerson();
  const seq = seqFrom(asked);
  const { parts } = await orNotFound(previewErasure({ person, subject: { machine }, seq }));
  const { record } = await orNotFound(readMachineRecord({ person, machine }));
  return (
    <>
      <PageHead
        label={<UserText>{`${record.machine.name}, entry ${seq}: ${record.entries[seq]?.title ?? ''}`}</UserText>}
        title={`Erase a part of entry ${seq}`}
        note="For a name, a number or a note that has to go. What was done cannot be erased: if it is wrong, strike the entry."
        actions={<LinkButton href={paths.entry(machine, seq)}>Back to the entry</LinkButton>}
      />
      <div className="grid max-w-[44rem] gap-6">
        <EraseReach where="entry" />
        <EraseForm
          action={eraseAction}
          hidden={{ machine, seq: String(seq), key: randomUUID() }}
          parts={parts}
          name={`entry ${seq}`}
        />
      </div>
    </>
  );
}
