'use client';

import { useActionState, type ReactNode } from 'react';
import { Notice } from '@/components/ui/notice';
import { SubmitButton } from '@/components/ui/submit-button';
import { emptyForm, type FormState } from '@/lib/form-state';

export type FormAction = (previous: FormState, form: FormData) => Promise<FormState>;

export interface FormShellProps {
  action: FormAction;
  submit: string;
  busy: string;
  /** plain: a form beside others on its page. */
  look?: 'main' | 'plain';
  label?: string;
  children: (state: FormState) => ReactNode;
}

/** A form of one server action: the answer above, the fields, one button. What was typed stays; passwords do not. */
export function FormShell({ action, submit, busy, look = 'main', label, children }: FormShellProps) {
  const [state, submitForm] = useActionState(action, emptyForm);
  return (
    <form action={submitForm} noValidate aria-label={label} className="grid gap-5">
      {state.message ? (
        <Notice tone={state.ok ? 'plain' : 'gap'} isLive>
          {state.message}
        </Notice>
      ) : null}
      {children(state)}
      <div>
        <SubmitButton look={look} busyText={busy} isWide={look === 'main'}>
          {submit}
        </SubmitButton>
      </div>
    </form>
  );
}
