'use client';

import { TextInput } from '@/components/ui/text-input';
import { FormShell, type FormAction } from './form-shell';
import { PasswordInput } from './password-input';

export function SignInForm({ action, next }: { action: FormAction; next: string | null }) {
  return (
    <FormShell action={action} submit="Sign in" busy="Signing in">
      {({ fields, typed }) => (
        <>
          <TextInput
            label="E-mail address"
            name="email"
            type="email"
            autoComplete="username"
            required
            defaultValue={typed.email}
            error={fields.email}
          />
          <PasswordInput
            label="Password"
            name="password"
            autoComplete="current-password"
            required
            error={fields.password}
          />
          {next === null ? null : <input type="hidden" name="next" value={next} />}
        </>
      )}
    </FormShell>
  );
}
