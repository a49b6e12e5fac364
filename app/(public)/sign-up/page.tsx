import type { Metadata } from 'next';
import Link from 'next/link';
import { FormPage } from '@/components/account/form-page';
import { SignUpForm } from '@/components/account/sign-up-form';
import { leaveIfSignedIn } from '@/lib/auth/session';
import { paths } from '@/lib/paths';
import { signUpAction } from './actions';

export const dynamic = 'force-dynamic';
export const metadata: Metadata = { title: 'Sign up' };

export default async function SignUpPage() {
  await leaveIfSignedIn();
  return (
    <FormPage
      title="Sign up"
      note="You get a mail with a link; open it and the account is yours."
      after={
        <p>
          Signed up before?{' '}
          <Link href={paths.signIn} className="link">
            Sign in
          </Link>
        </p>
      }
    >
      <SignUpForm action={signUpAction} />
    </FormPage>
  );
}
