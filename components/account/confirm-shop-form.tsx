'use client';

import { useActionState } from 'react';
import { FieldError } from '@/components/ui/field';
import { SubmitButton } from '@/components/ui/submit-button';
import { emptyForm } from '@/lib/form-state';
import type { FormAction } from './form-shell';

export function ConfirmShopForm({ action, shop }: { action: FormAction; shop: { id: string; name: string } }) {
  const [state, submit] = useActionState(action, emptyForm);
  return (
    <form action={submit}>
      <input type="hidden" name="shop" value={shop.id} />
      <SubmitButton busyText="Confirming" aria-label={`Confirm ${shop.name}`}>
        Confirm
      </SubmitButton>
      <FieldError id={`${shop.id}-error`} error={state.ok ? undefined : state.message} />
    </form>
  );
}
