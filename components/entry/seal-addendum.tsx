'use client';

import { startTransition, useActionState, useState } from 'react';
import type { FormAction } from '@/components/account/form-shell';
import { DiscardDraft } from '@/components/garage/discard-draft';
import { useDraftInScreen } from '@/components/garage/draft-context';
import { useGarage } from '@/components/garage/garage-context';
import { Dock } from '@/components/shell/dock';
import { Button } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { addendumFrom, addendumShown } from '@/lib/domain/addendum';
import { emptyForm } from '@/lib/form-state';
import { paths } from '@/lib/paths';

export interface SealAddendumProps {
  action: FormAction;
  machine: string;
  seq: number;
  mayISeal: boolean;
  onTry: () => void;
}

/** Sends what is left to send, then seals exactly what the form shows. */
export function SealAddendum({ action, machine, seq, mayISeal, onTry }: SealAddendumProps) {
  const { garage, view: garageView } = useGarage();
  const { opened, view, problems } = useDraftInScreen();
  const [state, submit, isPending] = useActionState(action, emptyForm);
  const [isSending, setIsSending] = useState(false);
  const [failure, setFailure] = useState<string>();
  const isBusy = isSending || isPending;

  async function seal() {
    onTry();
    setFailure(undefined);
    if (Object.keys(problems).length > 0) {
      document.querySelector<HTMLElement>('main textarea')?.focus();
      return;
    }
    setIsSending(true);
    await garage?.sendAll();
    setIsSending(false);
    const { unsentCount, files, draft, fields } = opened.view;
    if (unsentCount > 0 || files.some((file) => file.state === 'waiting')) {
      const isSignedOut = garageView.signal === 'not-signed-in';
      const why = isSignedOut ? 'Sign in to seal it.' : 'Sealing needs signal.';
      setFailure(draft.refusal ?? `${why} Everything is kept on this phone.`);
      return;
    }
    const form = new FormData();
    form.set('draft', draft.id);
    form.set('shown', addendumShown(addendumFrom(fields)));
    startTransition(() => submit(form));
  }

  const refusals = [failure, state.ok ? undefined : state.message, ...Object.values(state.fields)];
  const sentences = [...new Set(refusals.filter((one) => one !== undefined))];
  return (
    <div className="space-y-4">
      {view.draft.state === 'open' ? null : (
        <Notice tone="warn" title={`This addendum was ${view.draft.state} elsewhere`}>
          Go back to the entry. Nothing you typed here is lost from this phone.
        </Notice>
      )}
      {sentences.length === 0 || isBusy ? null : (
        <Notice tone="gap" isLive>
          {sentences.map((one) => (
            <p key={one}>{one}</p>
          ))}
        </Notice>
      )}
      <p className="tag">
        {mayISeal
          ? 'What stands above is what is sealed, with the server’s time. It can be struck, never edited.'
          : 'Only an owner of the machine can seal. What you write is kept: ask them to open this page and read it.'}
      </p>
      <DiscardDraft what="addendum" leaveTo={paths.entry(machine, seq)} onProblem={setFailure} />
      {mayISeal ? (
        <Dock>
          <Button size="big" look="seal" isBusy={isBusy} onClick={() => void seal()}>
            {isBusy ? 'Sealing' : 'Seal this addendum'}
          </Button>
        </Dock>
      ) : null}
    </div>
  );
}
