import type { Metadata } from 'next';
import { FormPage } from '@/components/account/form-page';
import { ConfirmEmailForm } from '@/components/account/password-forms';
import { LinkButton } from '@/components/ui/button';
import { readMailToken } from '@/lib/auth/mail-token';
import { paths } from '@/lib/paths';
import { confirmEmailAction } from './actions';

export const dynamic = 'force-dynamic';
export const metadata: Metadata = { title: 'Confirm your e-mail address', robots: { index: false } };

/** Opening the link changes nothing: mail programs open links by themselves. */
export default async function ConfirmEmailPage({ params }: { params: Promise<{ token: string }> }) {
  const { token } = await params;
  if ((await readMailToken(token, 'confirm-email')) === null) {
    return (
      <FormPage title="This link cannot be used">
        <p>It was used already, or it is more than 24 hours old.</p>
        <div className="mt-5 flex flex-wrap gap-2.5">
          <LinkButton href={paths.signIn}>Sign in</LinkButton>
          <LinkButton href={paths.signUp}>Sign up once more</LinkButton>
        </div>
      </FormPage>
    );
  }
  return (
    <FormPage title="Confirm your e-mail address" note="One press, then you can sign in.">
      <ConfirmEmailForm action={confirmEmailAction} token={token} />
    </FormPage>
  );
}
