import type { Metadata } from 'next';
import { FormPage } from '@/components/account/form-page';
import { AgreeToKeepForm, StopKeepingForm } from '@/components/proof/keeper-forms';
import { visitorAddress } from '@/lib/auth/visitor';
import { readKeeper } from '@/lib/services/answer-keeper';
import { agreeToKeepAction, stopKeepingAction } from './actions';

export const dynamic = 'force-dynamic';
export const metadata: Metadata = {
  title: 'Checkpoints of a service record',
  robots: { index: false },
};

/** Opening the link changes nothing: mail programs open links by themselves. */
export default async function KeepPage({ params }: { params: Promise<{ token: string }> }) {
  const { token } = await params;
  const keeper = await readKeeper({ token, address: await visitorAddress() });
  if (keeper === null || keeper.state === 'ended') {
    return (
      <FormPage title="No mails are sent by this link">
        <p>They were stopped, or the owner of the record took the address away. Nothing more is sent to it.</p>
      </FormPage>
    );
  }
  if (keeper.state === 'keeping') {
    return (
      <FormPage
        title="You keep checkpoints of a service record"
        note="One short mail after each new entry, with its length and root. Keep the mails; nothing else is asked of you."
      >
        <StopKeepingForm action={stopKeepingAction} token={token} />
      </FormPage>
    );
  }
  return (
    <FormPage title="Will you keep checkpoints of a service record?" note="One press, and another stops it again.">
      <div className="mb-5 grid gap-3">
        <p>
          After each new entry a short mail comes to your address: how long the record is, its root, and the server’s
          signature over both. It says nothing of the vehicle, its owner or the work.
        </p>
        <p>
          It is corroboration only. A mail shows that the record had this length and this root when it was sent; if the
          record is rewritten later, your mails contradict it.
        </p>
      </div>
      <AgreeToKeepForm action={agreeToKeepAction} token={token} />
    </FormPage>
  );
}
