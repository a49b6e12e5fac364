import type { Metadata } from 'next';
import Link from 'next/link';
import { FormPage } from '@/components/account/form-page';
import { ForgotPasswordForm } from '@/components/account/password-forms';
import { paths } from '@/lib/paths';
import { forgotPasswordAction } from './actions';

export const dynamic = 'force-dynamic';
export const metadata: Metadata = { title: 'Choose another password' };

export default function ForgotPasswordPage() {
  return (
    <FormPage
      title="Choose another password"
      note="A link goes to the address of your account."
      after={
        <p>
          <Link href={paths.signIn} className="link">
            Back to sign in
          </Link>
        </p>
      }
    >
      <ForgotPasswordForm action={forgotPasswordAction} />
    </FormPage>
  );
}
