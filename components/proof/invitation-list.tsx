import Link from 'next/link';
import { Sheet } from '@/components/ui/box';
import { UserText } from '@/components/ui/user-text';
import { formatInstant } from '@/lib/domain/instants';
import type { FormState } from '@/lib/form-state';
import { paths } from '@/lib/paths';
import type { InvitationState, ListedInvitation } from '@/lib/services/list-invitations';
import { ConfirmButton } from './confirm-button';

export const invitationWords: Record<InvitationState, string> = {
  waiting: 'Sent, not opened yet',
  opened: 'Opened, not answered yet',
  countersigned: 'Countersigned',
  declined: 'Declined',
  withdrawn: 'Withdrawn',
  'run-out': 'Ran out unanswered',
};

export interface InvitationListProps {
  machine: string;
  invitations: ListedInvitation[];
  zone: string;
  withdraw: (previous: FormState, form: FormData) => Promise<FormState>;
}

/** Who was asked about an entry, newest first, and what they answered. */
export function InvitationList({ machine, invitations, zone, withdraw }: InvitationListProps) {
  if (invitations.length === 0) return <p className="tag">No shop has been asked about this entry yet.</p>;
  return (
    <Sheet>
      <ul role="list" className="divide-y divide-hair">
        {invitations.map((invitation) => {
          const { id, email, state, createdAt, expiresAt, answeredAt, answerSeq, reason } = invitation;
          const isWaiting = state === 'waiting' || state === 'opened';
          return (
            <li key={id} className="flex flex-wrap items-center justify-between gap-x-5 gap-y-2 px-4 py-3">
              <div className="min-w-0 flex-1 basis-56">
                <p className="font-semibold">
                  <UserText>{email}</UserText>
                </p>
                <p>
                  {invitationWords[state]}
                  {answeredAt === null ? '' : ` ${formatInstant(answeredAt, zone)}`}
                  {answerSeq === null ? null : (
                    <>
                      ,{' '}
                      <Link href={paths.entry(machine, answerSeq)} className="link">
                        entry {answerSeq}
                      </Link>
                    </>
                  )}
                </p>
                {reason === '' ? null : (
                  <p>
                    They write: <UserText isMultiline>{reason}</UserText>
                  </p>
                )}
                <p className="tag">
                  Asked {formatInstant(createdAt, zone)}
                  {isWaiting ? `, can be answered until ${formatInstant(expiresAt, zone)}` : ''}
                </p>
              </div>
              {isWaiting ? (
                <ConfirmButton
                  action={withdraw}
                  name="invitation"
                  value={id}
                  text="Withdraw"
                  busyText="Withdrawing"
                  label={`Withdraw the invitation to ${email}`}
                  title="Withdraw this invitation?"
                >
                  <p>
                    The address in the mail to <UserText>{email}</UserText> stops working at the next request.
                  </p>
                </ConfirmButton>
              ) : null}
            </li>
          );
        })}
      </ul>
    </Sheet>
  );
}
