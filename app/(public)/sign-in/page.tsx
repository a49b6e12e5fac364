import type { Metadata } from 'next';
import Link from 'next/link';
import { FormPage } from '@/components/account/form-page';
import { SignInForm } from '@/components/account/sign-in-form';
import { Notice } from '@/components/ui/notice';
import { localPath } from '@/lib/auth/local-path';
import { leaveIfSignedIn } from '@/lib/auth/session';
import { paths } from '@/lib/paths';
import { signInAction } from './actions';

export const dynamic = 'force-dynamic';
export const metadata: Metadata = { title: 'Sign in' };

const news: Record<string, string> = {
  confirmed: 'Your e-mail address is confirmed. Sign in with the password you chose.',
  'new-password': 'Your password was changed and every session was ended. Sign in with the new one.',
  'signed-out': 'You are signed out on this device.',
};

type Props = { searchParams: Promise<Record<string, string | string[] | undefined>> };

export default async function SignInPage({ searchParams }: Props) {
  await leaveIfSignedIn();
  const { after, next } = await searchParams;
  const sentence = typeof after === 'string' ? news[after] : undefined;
  return (
    <FormPage
      title="Sign in"
      notice={sentence ? <Notice>{sentence}</Notice> : null}
      after={
        <>
          <p>
            <Link href={paths.forgotPassword} className="link">
              I have forgotten my password
            </Link>
          </p>
          <p>
            No account yet?{' '}
            <Link href={paths.signUp} className="link">
              Sign up
            </Link>
          </p>
        </>
      }
    >
      <SignInForm action={signInAction} next={localPath(next)} />
    </FormPage>
  );
}
