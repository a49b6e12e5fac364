import type { Metadata } from 'next';
import { notFound } from 'next/navigation';
import { InvitationList } from '@/components/proof/invitation-list';
import { InviteForm } from '@/components/proof/invite-form';
import { LinkButton } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { paths } from '@/lib/paths';
import { listEntryInvitations } from '@/lib/services/list-invitations';
import { inviteAction, withdrawAction } from './actions';

export const metadata: Metadata = { title: 'Ask a shop to countersign' };

export default async function InvitePage({ params }: { params: Promise<{ machine: string; seq: string }> }) {
  const { machine: machineId, seq: asked } = await params;
  const person = await requirePerson();
  if (!/^(0|[1-9]\d{0,8})$/.test(asked)) notFound();
  const seq = Number(asked);
  const { machine, kind, invitations } = await orNotFound(listEntryInvitations({ person, machineId, seq }));
  return (
    <>
      <PageHead
        label={
          <>
            <UserText>{machine.name}</UserText>, entry {seq}
          </>
        }
        title="Ask a shop to countersign"
        note="The shop reads the entry as it was sealed, says in which capacity it vouches for it, and signs or declines. Its statement becomes an entry of its own."
        actions={<LinkButton href={paths.entry(machineId, seq)}>Back to the entry</LinkButton>}
      />
      {kind === 'service' ? (
        <div className="max-w-[36rem]">
          <InviteForm action={inviteAction} machine={machineId} seq={seq} />
        </div>
      ) : (
        <Notice tone="warn">Only a service can be countersigned; this entry is none.</Notice>
      )}
      <section aria-labelledby="asked" className="mt-8">
        <h2 id="asked" className="mb-3">
          Asked so far
        </h2>
        <InvitationList
          machine={machineId}
          invitations={invitations}
          zone={machine.timeZone}
          withdraw={withdrawAction}
        />
        <p className="tag mt-3 max-w-[70ch]">
          A countersignature also says since when the shop’s account exists and whether the steward of this installation
          has confirmed the shop. Until then readers see “not confirmed: this could be the owner”.
        </p>
      </section>
    </>
  );
}
