import type { Metadata } from 'next';
import { notFound, redirect } from 'next/navigation';
import { z } from 'zod';
import { EntryView } from '@/components/entry/entry-view';
import { AnswerPart } from '@/components/proof/answer-part';
import { CountersignMeaning } from '@/components/proof/countersign-meaning';
import { readerFacts, readerLinks } from '@/components/reader/reader-links';
import { ReaderShell } from '@/components/shell/reader-shell';
import { orNotFound } from '@/lib/auth/guard';
import { signInPath } from '@/lib/auth/local-path';
import { isReading } from '@/lib/auth/reader-cookie';
import { currentPerson } from '@/lib/auth/session';
import { env } from '@/lib/env';
import { WitnessmarkError } from '@/lib/errors';
import { paths } from '@/lib/paths';
import { usablePasskeys } from '@/lib/services/list-passkeys';
import { passkeySite } from '@/lib/services/passkey-site';
import { readInvitedEntry } from '@/lib/services/read-invited-entry';
import { addPasskeyAction, beginPasskeyAction } from '@/app/(rider)/account/passkey-actions';
import { answerAction, nameShopAction, signCountersignatureAction } from './actions';

export const dynamic = 'force-dynamic';
export const metadata: Metadata = {
  title: 'Please countersign',
  robots: { index: false },
  referrer: 'strict-origin',
};

export default async function AnswerPage({ params }: { params: Promise<{ invitation: string }> }) {
  const { invitation: id } = await params;
  if (!z.uuid().safeParse(id).success) notFound();
  const [person, cameByAddress] = await Promise.all([currentPerson(), isReading('invitations', id)]);
  const invited = await orNotFound(readInvitedEntry({ id, cameByAddress, person })).catch((error: unknown) => {
    if (error instanceof WitnessmarkError && error.code === 'gone') return null;
    throw error;
  });
  if (invited === null) redirect(paths.invitationEnded(id));
  const { record, entry, timesInjected } = invited;
  const keys = person === null ? [] : await usablePasskeys({ personId: person.id });
  const file = (sha256: string, kind: 'thumb' | 'plate' | 'copy') => paths.invitationFile(id, sha256, kind);
  return (
    <ReaderShell
      words="An invitation to countersign one entry"
      demo={timesInjected ? 'demo-times-injected' : env.isDemo ? 'demo' : 'none'}
    >
      <CountersignMeaning invited={invited} />
      <EntryView entry={entry} facts={readerFacts(invited)} links={readerLinks({ record, file })} />
      <AnswerPart
        invited={invited}
        isSignedIn={person !== null}
        signInHref={signInPath(paths.invitationAnswer(id))}
        nameShop={nameShopAction}
        answer={answerAction}
        ownKey={{
          hasKey: keys.length > 0,
          refusal: passkeySite().refusal,
          email: person?.email ?? '',
          begin: beginPasskeyAction,
          finish: addPasskeyAction,
          sign: signCountersignatureAction,
        }}
      />
    </ReaderShell>
  );
}
