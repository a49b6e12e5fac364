import { randomUUID } from 'node:crypto';
import type { Metadata } from 'next';
import { StrikeEffects } from '@/components/entry/strike-effects';
import { StrikeForm } from '@/components/entry/strike-form';
import { LinkButton } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { paths } from '@/lib/paths';
import { previewStrike } from '@/lib/services/preview-strike';
import { readMachineRecord } from '@/lib/services/read-machine-record';
import { seqFrom } from '@/app/(rider)/seq-from';
import { strikeAction } from './actions';

export const metadata: Metadata = { title: 'Strike an entry' };

export default async function StrikePage({ params }: { params: Promise<{ machine: string; seq: string }> }) {
  const { machine, seq: asked } = await params;
  const person = await requirePerson();
  const seq = seqFrom(asked);
  const preview = await orNotFound(previewStrike({ person, subject: { machine }, seq }));
  const { record } = await orNotFound(readMachineRecord({ person, machine }));
  return (
    <>
      <PageHead
        label={<UserText>{`${record.machine.name}, entry ${seq}: ${record.entries[seq]?.title ?? ''}`}</UserText>}
        title={`Strike entry ${seq}?`}
        note="A strike withdraws an entry for a reason. It is an entry of its own: every reader sees both."
        actions={<LinkButton href={paths.entry(machine, seq)}>Back to the entry</LinkButton>}
      />
      {preview.refusal === null ? (
        <div className="grid max-w-[44rem] gap-6">
          <StrikeEffects preview={preview} />
          <StrikeForm
            action={strikeAction}
            hidden={{ machine, seq: String(seq), key: randomUUID() }}
            name={`entry ${seq}`}
          />
        </div>
      ) : (
        <Notice tone="warn" title={`Entry ${seq} cannot be struck`}>
          {preview.refusal}
        </Notice>
      )}
    </>
  );
}
