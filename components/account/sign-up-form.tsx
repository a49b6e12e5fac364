'use client';

import { useSyncExternalStore } from 'react';
import { Select } from '@/components/ui/select';
import { TextInput } from '@/components/ui/text-input';
import { FormShell, type FormAction } from './form-shell';
import { PasswordInput } from './password-input';

const never = () => () => {};

/** The device knows its time zone; the server does not. */
function useTimeZone(): string {
  return useSyncExternalStore(
    never,
    () => Intl.DateTimeFormat().resolvedOptions().timeZone,
    () => 'UTC',
  );
}

export function SignUpForm({ action }: { action: FormAction }) {
  const timeZone = useTimeZone();
  return (
    <FormShell action={action} submit="Sign up" busy="Signing up">
      {({ fields, typed }) => (
        <>
          <TextInput
            label="Name"
            name="name"
            autoComplete="name"
            required
            defaultValue={typed.name}
            error={fields.name}
            hint="As it should stand in the record: you sign for what you seal."
          />
          <TextInput
            label="E-mail address"
            name="email"
            type="email"
            autoComplete="email"
            required
            defaultValue={typed.email}
            error={fields.email}
          />
          <PasswordInput
            label="Password"
            name="password"
            autoComplete="new-password"
            required
            error={fields.password}
            hint="At least 8 characters; three or four words are better."
          />
          <Select
            key={typed.units}
            label="Units"
            name="units"
            defaultValue={typed.units}
            error={fields.units}
            options={[
              { value: 'us', label: 'Miles, US quarts, lbf·ft' },
              { value: 'metric', label: 'Kilometres, litres, N·m' },
            ]}
            hint="Each figure can still be typed in any unit."
          />
          <input type="hidden" name="timeZone" value={timeZone} />
        </>
      )}
    </FormShell>
  );
}
