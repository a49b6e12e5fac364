import { randomUUID } from 'node:crypto';
import type { Metadata } from 'next';
import { seqFrom } from '@/app/(rider)/seq-from';
import { BlackOutPage } from '@/components/black-out/black-out-page';
import { LinkButton } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { paths } from '@/lib/paths';
import { picturesToBlackOut } from '@/lib/services/pictures-to-black-out';
import { readMachineRecord } from '@/lib/services/read-machine-record';
import { blackOutAction } from './actions';

export const metadata: Metadata = { title: 'Black out part of a picture' };

interface Props {
  params: Promise<{ machine: string; seq: string }>;
  searchParams: Promise<{ picture?: string | string[] }>;
}

export default async function BlackOutEntryPage({ params, searchParams }: Props) {
  const [{ machine, seq: asked }, { picture }] = await Promise.all([params, searchParams]);
  const person = await requirePerson();
  const seq = seqFrom(asked);
  const { pictures } = await orNotFound(picturesToBlackOut({ person, subject: { machine }, seq }));
  const { record } = await orNotFound(readMachineRecord({ person, machine }));
  return (
    <>
      <PageHead
        label={<UserText>{`${record.machine.name}, entry ${seq}: ${record.entries[seq]?.title ?? ''}`}</UserText>}
        title="Black out part of a picture"
        note="For a number plate, a name or a price that readers are not to see."
        actions={<LinkButton href={paths.entry(machine, seq)}>Back to the entry</LinkButton>}
      />
      <BlackOutPage
        action={blackOutAction}
        hidden={{ machine, seq: String(seq), key: randomUUID() }}
        name={`entry ${seq}`}
        pictures={pictures}
        chosen={typeof picture === 'string' ? picture : undefined}
        file={(sha256, kind) => paths.api.file(sha256, kind, machine)}
        hrefOf={(copy) => paths.blackOut(machine, seq, copy)}
      />
    </>
  );
}
