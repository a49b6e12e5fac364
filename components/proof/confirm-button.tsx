'use client';

import { useActionState, useState, type ReactNode } from 'react';
import { Button } from '@/components/ui/button';
import { Dialog } from '@/components/ui/dialog';
import { FieldError } from '@/components/ui/field';
import { SubmitButton } from '@/components/ui/submit-button';
import { emptyForm, type FormState } from '@/lib/form-state';

export interface ConfirmButtonProps {
  action: (previous: FormState, form: FormData) => Promise<FormState>;
  /** The one hidden field: what it is done to. */
  name: string;
  value: string;
  /** The button's word, and the act's: "Revoke". */
  text: string;
  busyText: string;
  /** Names the button among others of its kind: "Revoke the link for Brandywell". */
  label: string;
  title: ReactNode;
  /** What happens, before it happens. */
  children: ReactNode;
}

/** An act that cannot be taken back: asked once more, then done at once. */
export function ConfirmButton(props: ConfirmButtonProps) {
  const { action, name, value, text, busyText, label, title, children } = props;
  const [isOpen, setOpen] = useState(false);
  const [state, submit] = useActionState(action, emptyForm);
  const formId = `${name}-${value}`;
  return (
    <>
      <Button onClick={() => setOpen(true)} aria-label={label}>
        {text}
      </Button>
      <Dialog title={title} isOpen={isOpen} onClose={() => setOpen(false)} closeText="Keep it">
        <form id={formId} action={submit} className="grid gap-4">
          <input type="hidden" name={name} value={value} />
          {children}
          <FieldError id={`${formId}-error`} error={state.ok ? undefined : state.message} />
          <div className="flex justify-end">
            <SubmitButton look="main" busyText={busyText}>
              {text}
            </SubmitButton>
          </div>
        </form>
      </Dialog>
    </>
  );
}
