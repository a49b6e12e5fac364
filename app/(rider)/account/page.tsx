import type { Metadata } from 'next';
import type { ReactNode } from 'react';
import { AccountForm } from '@/components/account/account-form';
import { ChangePasswordForm } from '@/components/account/password-forms';
import { SessionList } from '@/components/account/session-list';
import { SignOutForm } from '@/components/account/sign-out-form';
import { PasskeyPart } from '@/components/passkey/passkey-part';
import { Sheet } from '@/components/ui/box';
import { LinkButton } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { requireSession } from '@/lib/auth/session';
import { formatInstant } from '@/lib/domain/instants';
import { paths } from '@/lib/paths';
import { readSessions } from '@/lib/services/end-session';
import { listPasskeys } from '@/lib/services/list-passkeys';
import { passkeySite } from '@/lib/services/passkey-site';
import { signOutAction } from '@/app/(public)/sign-in/actions';
import { changeAccountAction, changePasswordAction, endOneAction, endOthersAction } from './actions';
import { timeZones, unitOptions } from './choices';
import { addPasskeyAction, beginPasskeyAction, removePasskeyAction } from './passkey-actions';

export const dynamic = 'force-dynamic';
export const metadata: Metadata = { title: 'Account' };

export default async function AccountPage() {
  const { person, session } = await requireSession();
  const { name, email, distanceUnit, volumeUnit, torqueUnit, timeZone } = person;
  const [sessions, keys] = await Promise.all([readSessions({ person, current: session.id }), listPasskeys({ person })]);
  const words = (instant: string) => formatInstant(instant, timeZone);
  return (
    <>
      <PageHead
        title="Account"
        note={email}
        actions={
          <>
            <LinkButton href={paths.imports}>Records from elsewhere</LinkButton>
            <SignOutForm action={signOutAction} />
          </>
        }
      />
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
        <Part title="Your own key" id="own-key">
          <PasskeyPart
            keys={keys.map(({ createdAt, lastUsedAt, ...rest }) => ({
              ...rest,
              added: words(createdAt),
              used: lastUsedAt === null ? null : words(lastUsedAt),
            }))}
            refusal={passkeySite().refusal}
            begin={beginPasskeyAction}
            finish={addPasskeyAction}
            remove={removePasskeyAction}
            email={email}
          />
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

function Part({ title, id, children }: { title: string; id?: string; children: ReactNode }) {
  return (
    <section id={id}>
      <h2 className="mb-3">{title}</h2>
      <Sheet className="p-4 sm:p-6">{children}</Sheet>
    </section>
  );
}
