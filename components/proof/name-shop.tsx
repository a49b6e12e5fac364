'use client';

import { FormShell, type FormAction } from '@/components/account/form-shell';
import { TextInput } from '@/components/ui/text-input';

/** The shop a technician answers for, named once. */
export function NameShop({ action, invitation }: { action: FormAction; invitation: string }) {
  return (
    <FormShell action={action} submit="This is my shop" busy="Saving" label="The shop you answer for">
      {({ fields, typed }) => (
        <>
          <input type="hidden" name="invitation" value={invitation} />
          <TextInput
            label="Name of the shop"
            name="name"
            autoComplete="organization"
            hint="As customers know it. It stands in every countersignature."
            defaultValue={typed.name}
            error={fields.name}
          />
          <TextInput
            label="Street and town"
            name="address"
            autoComplete="street-address"
            defaultValue={typed.address}
            error={fields.address}
          />
          <TextInput
            label="Trade register or licence number"
            name="registration"
            isOptional
            hint="Helps the steward and every reader to find you."
            defaultValue={typed.registration}
            error={fields.registration}
          />
        </>
      )}
    </FormShell>
  );
}
