'use client';

import { useActionState } from 'react';
import { SubmitButton } from '@/components/ui/submit-button';
import { emptyForm } from '@/lib/form-state';
import type { FormAction } from './form-shell';

export function SignOutForm({ action }: { action: FormAction }) {
  const [, submit] = useActionState(action, emptyForm);
  return (
    <form action={submit}>
      <SubmitButton busyText="Signing out">Sign out</SubmitButton>
    </form>
  );
}
