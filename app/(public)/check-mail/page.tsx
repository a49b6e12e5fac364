import type { Metadata } from 'next';
import Link from 'next/link';
import { FormPage } from '@/components/account/form-page';
import { env } from '@/lib/env';
import { paths } from '@/lib/paths';

export const dynamic = 'force-dynamic';
export const metadata: Metadata = { title: 'Look in your mail' };

type Props = { searchParams: Promise<Record<string, string | string[] | undefined>> };

export default async function CheckMailPage({ searchParams }: Props) {
  const isReset = (await searchParams).for === 'reset';
  const again = isReset ? paths.forgotPassword : paths.signUp;
  return (
    <FormPage
      title="Look in your mail"
      after={
        <p>
          No mail after ten minutes? Look among the unwanted ones, then{' '}
          <Link href={again} className="link">
            try once more
          </Link>
          .
        </p>
      }
    >
      <p>
        {isReset
          ? 'If there is an account with this address, a link to choose another password is on its way. It works once, within the hour.'
          : 'A mail is on its way to the address you typed. Open its link within 24 hours, then sign in.'}
      </p>
      {env.smtp === undefined ? (
        <p className="tag mt-4">
          This installation sends no mail yet: it keeps each one as a file in its data folder, where its steward can
          read it.
        </p>
      ) : null}
    </FormPage>
  );
}
