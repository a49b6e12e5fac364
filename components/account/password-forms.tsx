'use client';

import { TextInput } from '@/components/ui/text-input';
import { FormShell, type FormAction } from './form-shell';
import { PasswordInput } from './password-input';

const newPasswordHint = 'At least 8 characters; three or four words are better.';

/** Asks for the address a link goes to. */
export function ForgotPasswordForm({ action }: { action: FormAction }) {
  return (
    <FormShell action={action} submit="Send the link" busy="Sending">
      {({ fields, typed }) => (
        <TextInput
          label="E-mail address"
          name="email"
          type="email"
          autoComplete="username"
          required
          defaultValue={typed.email}
          error={fields.email}
        />
      )}
    </FormShell>
  );
}

export function ResetPasswordForm({ action, token }: { action: FormAction; token: string }) {
  return (
    <FormShell action={action} submit="Keep this password" busy="Keeping it">
      {({ fields }) => (
        <>
          <PasswordInput
            label="New password"
            name="password"
            autoComplete="new-password"
            required
            error={fields.password}
            hint={newPasswordHint}
          />
          <input type="hidden" name="token" value={token} />
        </>
      )}
    </FormShell>
  );
}

export function ConfirmEmailForm({ action, token }: { action: FormAction; token: string }) {
  return (
    <FormShell action={action} submit="Confirm this address" busy="Confirming">
      {() => <input type="hidden" name="token" value={token} />}
    </FormShell>
  );
}

export function ChangePasswordForm({ action, email }: { action: FormAction; email: string }) {
  return (
    <FormShell action={action} submit="Change password" busy="Changing" look="plain" label="Change password">
      {({ fields }) => (
        <>
          {/* Lets a password manager know whose password this is. */}
          <input type="hidden" name="username" autoComplete="username" value={email} readOnly />
          <PasswordInput
            label="Present password"
            name="password"
            autoComplete="current-password"
            required
            error={fields.password}
          />
          <PasswordInput
            label="New password"
            name="newPassword"
            autoComplete="new-password"
            required
            error={fields.newPassword}
            hint={newPasswordHint}
          />
        </>
      )}
    </FormShell>
  );
}
