'use client';

import { useState } from 'react';
import { Checkbox } from '@/components/ui/checkbox';
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
      <Checkbox
        label={<span className="tag">Show what I type</span>}
        checked={isShown}
        onChange={(event) => setShown(event.target.checked)}
        className="mt-1"
      />
    </div>
  );
}
