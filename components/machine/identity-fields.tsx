'use client';

import { useState } from 'react';
import { TextInput } from '@/components/ui/text-input';
import { checkVin, normaliseVin } from '@/lib/domain/vin';
import { FormPart, type PartProps } from './form-part';

const vinLength = 17;

/** What can be said while a VIN is being typed; a refusal waits until it is whole or the field is left. */
function wordsFor(vin: string, isLeft: boolean): { hint: string; error?: string | undefined } {
  const plain = 'Seventeen characters, on the frame and on the registration.';
  if (vin === '') return { hint: plain };
  const length = normaliseVin(vin).length;
  const check = checkVin(vin);
  const isWrongCharacter = check.error?.startsWith('Position') === true;
  if (check.error !== undefined && (isLeft || length >= vinLength || isWrongCharacter)) {
    return { hint: plain, error: check.error };
  }
  if (check.error !== undefined) return { hint: `${length} of ${vinLength} characters.` };
  if (check.warnings.length > 0) return { hint: check.warnings.join(' ') };
  return { hint: 'The check digit fits.' };
}

export function IdentityFields({ typed, fields }: PartProps) {
  const [vin, setVin] = useState(typed.vin ?? '');
  const [isLeft, setIsLeft] = useState(false);
  const { hint, error } = wordsFor(vin, isLeft);
  // What the server said holds until the text it was said of changes.
  const refused = vin === (typed.vin ?? '') ? fields.vin : undefined;
  return (
    <FormPart
      title="Its identity"
      note="Sealed in a part of its own, so that it can be withheld, or erased for good, without breaking the record."
    >
      <TextInput
        label="VIN"
        name="vin"
        value={vin}
        onChange={(event) => {
          setVin(event.target.value);
          setIsLeft(false);
        }}
        onBlur={() => setIsLeft(true)}
        hint={hint}
        error={error ?? refused}
        autoCapitalize="characters"
        autoComplete="off"
        spellCheck={false}
        className="md:col-span-2"
      />
      <TextInput
        label="Frame number"
        isOptional
        name="frameNumber"
        defaultValue={typed.frameNumber}
        error={fields.frameNumber}
        hint="For a machine without a VIN, such as one made before 1981."
        autoComplete="off"
      />
      <TextInput
        label="Engine number"
        isOptional
        name="engineNumber"
        defaultValue={typed.engineNumber}
        error={fields.engineNumber}
        autoComplete="off"
      />
    </FormPart>
  );
}
