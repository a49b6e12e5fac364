'use client';

import { FormShell, type FormAction } from '@/components/account/form-shell';
import { TextInput } from '@/components/ui/text-input';

/** Asks one address whether it wants to keep checkpoints. */
export function AskKeeper({ action, machine }: { action: FormAction; machine: string }) {
  return (
    <FormShell action={action} submit="Ask this address" busy="Asking" look="plain" label="Ask a checkpoint keeper">
      {({ fields, typed }) => (
        <>
          <input type="hidden" name="machine" value={machine} />
          <TextInput
            label="E-mail address"
            name="email"
            type="email"
            autoComplete="off"
            required
            hint="It is asked once, by mail; nothing more is sent until somebody there says yes."
            defaultValue={typed.email}
            error={fields.email}
          />
        </>
      )}
    </FormShell>
  );
}
