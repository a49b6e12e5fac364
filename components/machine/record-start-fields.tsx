'use client';

import { useState } from 'react';
import { NumberInput } from '@/components/ui/number-input';
import { Segments } from '@/components/ui/segments';
import { TextInput } from '@/components/ui/text-input';
import { FormPart, type PartProps } from './form-part';

const starts = [
  { value: 'new', label: 'New' },
  { value: 'bought-used', label: 'Bought used' },
  { value: 'from-paper', label: 'From paper' },
];

const meanings: Record<string, string> = {
  new: 'From the first day on: everything that was due counts.',
  'bought-used': 'Earlier work is “before this record”: neither late nor in time. A service to start from is proposed.',
  'from-paper': 'Older services are entered from their papers and marked as recorded later.',
};

export function RecordStartFields({ typed, fields }: PartProps) {
  const [why, setWhy] = useState(typed.why ?? 'new');
  return (
    <FormPart title="Where its record starts">
      <Segments
        label="How it came to you"
        name="why"
        options={starts}
        value={why}
        onChange={setWhy}
        hint={meanings[why]}
        error={fields.why}
        className="md:col-span-2"
      />
      <TextInput
        label="First used on"
        isOptional={why !== 'new'}
        name="firstUseOn"
        type="date"
        defaultValue={typed.firstUseOn}
        error={fields.firstUseOn}
      />
      <NumberInput
        label="Odometer then"
        isOptional
        name="firstUseOdometer"
        defaultValue={typed.firstUseOdometer}
        error={fields.firstUseOdometer}
      />
      {why === 'new' ? null : (
        <>
          <TextInput
            label={why === 'bought-used' ? 'Bought on' : 'This record starts on'}
            name="startsOn"
            type="date"
            defaultValue={typed.startsOn}
            error={fields.startsOn}
          />
          <NumberInput
            label="Odometer on that day"
            isOptional={why !== 'bought-used'}
            name="startsOdometer"
            defaultValue={typed.startsOdometer}
            error={fields.startsOdometer}
          />
        </>
      )}
    </FormPart>
  );
}
