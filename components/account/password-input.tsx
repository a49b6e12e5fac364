'use client';

import { useState } from 'react';
import { TextInput, type TextInputProps } from '@/components/ui/text-input';

export type PasswordInputProps = Omit<TextInputProps, 'type' | 'defaultValue' | 'value'>;

/** A password that can be shown while it is typed: gloves and small keys make mistakes. Pasting is welcome. */
export function PasswordInput(props: PasswordInputProps) {
  const [isShown, setShown] = useState(false);
  return (
    <div>
      <TextInput
        {...props}
        type={isShown ? 'text' : 'password'}
        autoCapitalize="none"
        autoCorrect="off"
        spellCheck={false}
      />
      <label className="mt-1 inline-flex min-h-11 items-center gap-2.5">
        <input
          type="checkbox"
          checked={isShown}
          onChange={(event) => setShown(event.target.checked)}
          className="size-5 accent-petrol"
        />
        <span className="tag">Show what I type</span>
      </label>
    </div>
  );
}
