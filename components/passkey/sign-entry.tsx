'use client';

import { useActionState, useEffect, useRef } from 'react';
import type { FormAction } from '@/components/account/form-shell';
import { Notice } from '@/components/ui/notice';
import { SubmitButton } from '@/components/ui/submit-button';
import { emptyForm } from '@/lib/form-state';
import { PasskeyStep } from './passkey-step';

export interface SignEntryProps {
  begin: FormAction;
  finish: FormAction;
  machine: string;
  seq: number;
  /** The person pressed "Seal and sign" a moment ago: the key is asked at once. */
  isAsked: boolean;
}

/** Signs a sealed entry with the person's own key. */
export function SignEntry({ begin, finish, machine, seq, isAsked }: SignEntryProps) {
  const [state, submit] = useActionState(begin, emptyForm);
  const form = useRef<HTMLFormElement>(null);
  const hasBegun = useRef(false);
  useEffect(() => {
    if (!isAsked || hasBegun.current) return;
    hasBegun.current = true;
    // Loaded again, the page must not ask again.
    window.history.replaceState(null, '', window.location.pathname);
    form.current?.requestSubmit();
  }, [isAsked]);
  return (
    <form ref={form} action={submit} className="grid justify-items-start gap-3" aria-label="Sign with my own key">
      <input type="hidden" name="machine" value={machine} />
      <input type="hidden" name="seq" value={seq} />
      {state.message && !state.ok ? (
        <Notice tone="gap" isLive>
          {state.message}
        </Notice>
      ) : null}
      <PasskeyStep
        question={state.question}
        finish={finish}
        ifRefused="The entry is sealed and stays so. You can sign it later."
      />
      <SubmitButton busyText="Asking">Sign with my own key</SubmitButton>
    </form>
  );
}
