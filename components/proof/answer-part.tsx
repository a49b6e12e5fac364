import Link from 'next/link';
import type { FormAction } from '@/components/account/form-shell';
import { LinkButton } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { UserText } from '@/components/ui/user-text';
import { formatInstant } from '@/lib/domain/instants';
import { paths } from '@/lib/paths';
import type { InvitedEntry } from '@/lib/services/read-invited-entry';
import { AnswerForm, type OwnKey } from './answer-form';
import { NameShop } from './name-shop';
import { OfferKey, type OfferKeyProps } from './offer-key';

export interface AnswerPartProps {
  invited: InvitedEntry;
  isSignedIn: boolean;
  /** Leads to signing in and back here. */
  signInHref: string;
  nameShop: FormAction;
  answer: FormAction;
  ownKey: OwnKey & OfferKeyProps;
}

/** What the reader of an invitation can do now: sign in, name their shop, answer, or read the answer. */
export function AnswerPart(props: AnswerPartProps) {
  const { invited } = props;
  return (
    <section aria-labelledby="answer" className="mt-10 border-t border-line pt-6">
      <h2 id="answer" className="mb-3">
        {invited.invitation.answer === null ? 'Your answer' : 'The answer'}
      </h2>
      <Step {...props} />
    </section>
  );
}

function Step({ invited, isSignedIn, signInHref, nameShop, answer, ownKey }: AnswerPartProps) {
  const { invitation, shop, isOwn, entry } = invited;
  if (invitation.answer !== null) return <Result invited={invited} />;
  if (!isSignedIn) return <SignInFirst email={invitation.email} signInHref={signInHref} />;
  if (isOwn) {
    return (
      <Notice tone="gap" title="You own this machine or help with it">
        A countersignature must come from somebody else. Sign out and let the shop open the address itself.
      </Notice>
    );
  }
  if (entry.struckBy !== null) {
    return (
      <Notice tone="warn" title="This entry was struck since you were asked. There is nothing left to vouch for." />
    );
  }
  return (
    <div className="max-w-[44rem]">
      {shop === null ? (
        <>
          <p className="mb-4">Name the shop you answer for. This is asked once.</p>
          <NameShop action={nameShop} invitation={invitation.id} />
        </>
      ) : (
        <>
          <p className="mb-4">
            You answer for{' '}
            <Link href={paths.shop(shop.id)} className="link">
              <UserText>{shop.name}</UserText>
            </Link>
            {shop.isConfirmed
              ? ', confirmed by the steward of this installation.'
              : '. It is not confirmed by the steward yet, and readers will see “not confirmed: this could be the owner”.'}
          </p>
          <AnswerForm action={answer} invitation={invitation.id} shop={shop} seq={entry.seq} ownKey={ownKey} />
          {ownKey.hasKey ? null : <OfferKey {...ownKey} />}
        </>
      )}
    </div>
  );
}

function SignInFirst({ email, signInHref }: { email: string; signInHref: string }) {
  return (
    <Notice
      title="Sign in to answer"
      actions={
        <>
          <LinkButton href={signInHref} look="main">
            Sign in
          </LinkButton>
          <LinkButton href={paths.signUp}>Make an account</LinkButton>
        </>
      }
    >
      A countersignature names a person and their shop, so it needs an account. If you make one now, confirm the mail
      you get, then come back by the address in the invitation to <UserText>{email}</UserText>.
    </Notice>
  );
}

function Result({ invited: { invitation, zone } }: { invited: InvitedEntry }) {
  const { answer } = invitation;
  if (answer === null) return null;
  const at = formatInstant(answer.at, zone);
  if (answer.outcome === 'declined') {
    return (
      <Notice title={`Declined ${at}`}>
        <UserText>{answer.shop}</UserText> declined. The owner was told, and nothing was added to the record.
        {answer.reason === '' ? null : (
          <>
            {' '}
            Reason: <UserText isMultiline>{answer.reason}</UserText>
          </>
        )}
      </Notice>
    );
  }
  return (
    <Notice title={`Countersigned ${at}`}>
      The statement of <UserText>{answer.shop}</UserText> is entry {answer.seq} of the record. The owner can neither
      edit nor strike it. Keep the mail of the invitation: it remembers the record as it stood.
    </Notice>
  );
}
