'use client';

import { startTransition, useActionState, useState, type FormEvent } from 'react';
import { browserStore } from '@/components/garage/browser-store';
import { countUnsentDrafts, leaveGarage } from '@/components/garage/leave-garage';
import { Button } from '@/components/ui/button';
import { Dialog } from '@/components/ui/dialog';
import { emptyForm } from '@/lib/form-state';
import type { FormAction } from './form-shell';

type Unsent = 'keep' | 'delete';

/** Ends the session and clears this device; what was never sent is asked about first. */
export function SignOutForm({ action }: { action: FormAction }) {
  const [, submit, isPending] = useActionState(action, emptyForm);
  const [unsent, setUnsent] = useState(0);

  async function leave(choice: Unsent): Promise<void> {
    setUnsent(0);
    // A browser that keeps nothing has nothing to clear, and must not keep anybody signed in.
    await browserStore().then(
      (store) => leaveGarage(store, choice),
      () => undefined,
    );
    startTransition(() => submit(new FormData()));
  }

  async function ask(event: FormEvent): Promise<void> {
    event.preventDefault();
    const count = await browserStore().then(countUnsentDrafts, () => 0);
    if (count > 0) setUnsent(count);
    else await leave('keep');
  }

  return (
    <>
      <form action={submit} onSubmit={(event) => void ask(event)}>
        <Button type="submit" isBusy={isPending}>
          {isPending ? 'Signing out' : 'Sign out'}
        </Button>
      </form>
      <Dialog
        title={
          unsent === 1 ? 'One worksheet or receipt was never sent' : `${unsent} worksheets and receipts were never sent`
        }
        isOpen={unsent > 0}
        onClose={() => setUnsent(0)}
        closeText="Stay signed in"
        actions={
          <>
            <Button onClick={() => void leave('delete')}>Delete and sign out</Button>
            <Button look="main" onClick={() => void leave('keep')}>
              Keep and sign out
            </Button>
          </>
        }
      >
        <p>
          They are only on this device. Kept, they are sent once you sign in here again; deleted, they are gone.
          Everything else is cleared from this device.
        </p>
      </Dialog>
    </>
  );
}
