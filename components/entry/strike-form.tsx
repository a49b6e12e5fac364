'use client';

import { FormShell, type FormAction } from '@/components/account/form-shell';
import { Textarea } from '@/components/ui/textarea';

export interface StrikeFormProps {
  action: FormAction;
  /** What is struck, and the key that lets the form be sent once. */
  hidden: Record<string, string>;
  /** `entry 5` */
  name: string;
}

/** The reason, and the one act. */
export function StrikeForm({ action, hidden, name }: StrikeFormProps) {
  return (
    <FormShell action={action} submit={`Strike ${name}`} busy="Sealing the strike" label={`Strike ${name}`}>
      {({ fields, typed }) => (
        <>
          {Object.entries(hidden).map(([field, value]) => (
            <input key={field} type="hidden" name={field} value={value} />
          ))}
          <Textarea
            label="Why is it struck?"
            name="reason"
            required
            hint="It is sealed with the strike and shown to every reader, such as “Logged on the wrong machine”."
            maxLength={2000}
            defaultValue={typed.reason}
            error={fields.reason}
          />
        </>
      )}
    </FormShell>
  );
}
