import type { Metadata } from 'next';
import { FormPage } from '@/components/account/form-page';
import { ResetPasswordForm } from '@/components/account/password-forms';
import { LinkButton } from '@/components/ui/button';
import { readMailToken } from '@/lib/auth/mail-token';
import { paths } from '@/lib/paths';
import { resetPasswordAction } from './actions';

export const dynamic = 'force-dynamic';
export const metadata: Metadata = { title: 'Choose another password', robots: { index: false } };

export default async function ResetPasswordPage({ params }: { params: Promise<{ token: string }> }) {
  const { token } = await params;
  if ((await readMailToken(token, 'reset-password')) === null) {
    return (
      <FormPage title="This link cannot be used">
        <p>It was used already, or it is more than an hour old.</p>
        <div className="mt-5">
          <LinkButton href={paths.forgotPassword}>Send another link</LinkButton>
        </div>
      </FormPage>
    );
  }
  return (
    <FormPage title="Choose another password" note="Every session of your account ends, this device’s too.">
      <ResetPasswordForm action={resetPasswordAction} token={token} />
    </FormPage>
  );
}
