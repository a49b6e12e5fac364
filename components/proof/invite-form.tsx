'use client';

import { FormShell, type FormAction } from '@/components/account/form-shell';
import { TextInput } from '@/components/ui/text-input';
import { Textarea } from '@/components/ui/textarea';

/** Asks one shop, by e-mail, to countersign one entry. */
export function InviteForm({ action, machine, seq }: { action: FormAction; machine: string; seq: number }) {
  return (
    <FormShell action={action} submit="Send the invitation" busy="Sending" label="Invite a shop">
      {({ fields, typed }) => (
        <>
          <input type="hidden" name="machine" value={machine} />
          <input type="hidden" name="seq" value={seq} />
          <TextInput
            label="The shop’s e-mail address"
            name="email"
            type="email"
            autoComplete="off"
            required
            defaultValue={typed.email}
            error={fields.email}
          />
          <Textarea
            label="Message"
            name="message"
            isOptional
            hint="In your own words: what they did or saw, and when. It goes into the mail, not into the record."
            maxLength={1000}
            defaultValue={typed.message}
            error={fields.message}
          />
        </>
      )}
    </FormShell>
  );
}
