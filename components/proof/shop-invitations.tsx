import Link from 'next/link';
import { Sheet } from '@/components/ui/box';
import { UserText } from '@/components/ui/user-text';
import { formatInstant } from '@/lib/domain/instants';
import { paths } from '@/lib/paths';
import type { ShopInvitation } from '@/lib/services/list-invitations';
import { invitationWords } from './invitation-list';

export interface ShopInvitationsProps {
  title: string;
  invitations: ShopInvitation[];
  emptyText: string;
}

/** Invitations as their technician sees them. One that ended unanswered opens nothing any more. */
export function ShopInvitations({ title, invitations, emptyText }: ShopInvitationsProps) {
  return (
    <section className="mt-8">
      <h2 className="mb-3">{title}</h2>
      {invitations.length === 0 ? (
        <p className="tag">{emptyText}</p>
      ) : (
        <Sheet>
          <ul role="list" className="divide-y divide-hair">
            {invitations.map((invitation) => (
              <li key={invitation.id} className="relative px-4 py-3 hover:bg-paper has-focus-visible:bg-paper">
                <p className="font-semibold">
                  <InvitationTitle invitation={invitation} />
                </p>
                <p>{answerWords(invitation)}</p>
                <p className="tag">
                  Asked by <UserText>{invitation.invitedBy}</UserText>{' '}
                  {formatInstant(invitation.createdAt, invitation.zone)}
                </p>
              </li>
            ))}
          </ul>
        </Sheet>
      )}
    </section>
  );
}

function InvitationTitle({ invitation: { id, state, machine, seq } }: { invitation: ShopInvitation }) {
  const title = (
    <>
      Entry {seq} of a <UserText>{machine}</UserText>
    </>
  );
  if (state === 'withdrawn' || state === 'run-out') return title;
  return (
    <Link
      href={paths.invitationAnswer(id)}
      className="underline-offset-4 decoration-1 after:absolute after:inset-0 hover:underline"
    >
      {title}
    </Link>
  );
}

function answerWords({ state, answeredAt, expiresAt, answerSeq, zone }: ShopInvitation): string {
  if (answeredAt === null) {
    return state === 'withdrawn' || state === 'run-out'
      ? invitationWords[state]
      : `Can be answered until ${formatInstant(expiresAt, zone)}`;
  }
  const as = answerSeq === null ? '' : `, entry ${answerSeq}`;
  return `${invitationWords[state]} ${formatInstant(answeredAt, zone)}${as}`;
}
