import type { Metadata } from 'next';
import type { ReactNode } from 'react';
import { AccountForm } from '@/components/account/account-form';
import { ChangePasswordForm } from '@/components/account/password-forms';
import { SessionList } from '@/components/account/session-list';
import { SignOutForm } from '@/components/account/sign-out-form';
import { Sheet } from '@/components/ui/box';
import { PageHead } from '@/components/ui/page-head';
import { requireSession } from '@/lib/auth/session';
import { formatInstant } from '@/lib/domain/instants';
import { readSessions } from '@/lib/services/end-session';
import { signOutAction } from '@/app/(public)/sign-in/actions';
import { changeAccountAction, changePasswordAction, endOneAction, endOthersAction } from './actions';
import { timeZones, unitOptions } from './choices';

export const dynamic = 'force-dynamic';
export const metadata: Metadata = { title: 'Account' };

export default async function AccountPage() {
  const { person, session } = await requireSession();
  const { name, email, distanceUnit, volumeUnit, torqueUnit, timeZone } = person;
  const sessions = await readSessions({ person, current: session.id });
  const words = (instant: string) => formatInstant(instant, timeZone);
  return (
    <>
      <PageHead title="Account" note={email} actions={<SignOutForm action={signOutAction} />} />
      <div className="grid max-w-[44rem] gap-8">
        <Part title="Name and units">
          <AccountForm
            action={changeAccountAction}
            account={{ name, email, distanceUnit, volumeUnit, torqueUnit, timeZone }}
            units={unitOptions}
            timeZones={timeZones}
          />
        </Part>
        <Part title="Password">
          <ChangePasswordForm action={changePasswordAction} email={email} />
        </Part>
        <Part title="Where you are signed in">
          <SessionList
            sessions={sessions.map(({ createdAt, lastSeenAt, ...rest }) => ({
              ...rest,
              begun: words(createdAt),
              seen: words(lastSeenAt),
            }))}
            endOne={endOneAction}
            endOthers={endOthersAction}
          />
        </Part>
      </div>
    </>
  );
}

function Part({ title, children }: { title: string; children: ReactNode }) {
  return (
    <section>
      <h2 className="mb-3">{title}</h2>
      <Sheet className="p-4 sm:p-6">{children}</Sheet>
    </section>
  );
}
