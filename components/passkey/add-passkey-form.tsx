'use client';

import { useState } from 'react';
import { FormShell, type FormAction } from '@/components/account/form-shell';
import { PasswordInput } from '@/components/account/password-input';
import { TextInput } from '@/components/ui/text-input';
import { PasskeyStep } from './passkey-step';

export interface AddPasskeyFormProps {
  /** Asks for the password again and answers with the question to the authenticator. */
  begin: FormAction;
  finish: FormAction;
  email: string;
}

/** Adds a key in one step: name it, give the password, answer the browser's prompt. */
export function AddPasskeyForm({ begin, finish, email }: AddPasskeyFormProps) {
  const [added, setAdded] = useState<string | null>(null);
  return (
    <FormShell action={begin} submit="Add a key" busy="Asking" look="plain" label="Add a key">
      {({ fields, typed, question }) => (
        <>
          <input type="hidden" name="username" autoComplete="username" value={email} readOnly />
          <TextInput
            label="Name of the key"
            name="name"
            required
            maxLength={60}
            // Once its key is added the name is that key’s; the field is for the next one.
            key={added}
            defaultValue={added !== null && question?.id === added ? '' : typed.name}
            error={fields.name}
            hint="Where you will find it again: “Phone”, “Key on my ring”."
          />
          <PasswordInput
            label="Present password"
            name="password"
            autoComplete="current-password"
            required
            error={fields.password}
          />
          <PasskeyStep
            question={question}
            finish={finish}
            fields={{ name: typed.name ?? '' }}
            ifRefused="No key was added."
            onDone={({ id }) => setAdded(id)}
          />
        </>
      )}
    </FormShell>
  );
}
