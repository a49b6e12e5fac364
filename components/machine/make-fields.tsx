'use client';

import { useState } from 'react';
import { Segments } from '@/components/ui/segments';
import { Select } from '@/components/ui/select';
import { TextInput } from '@/components/ui/text-input';
import { FormPart, type PartProps } from './form-part';

export const distanceOptions = [
  { value: '[mi_i]', label: 'mi' },
  { value: 'km', label: 'km' },
];

export function MakeFields({ typed, fields, kinds }: PartProps & { kinds: { value: string; label: string }[] }) {
  const [kind, setKind] = useState(typed.kind ?? '');
  return (
    <FormPart title="The machine">
      <TextInput label="Make" name="make" defaultValue={typed.make} error={fields.make} autoComplete="off" />
      <TextInput label="Model" name="model" defaultValue={typed.model} error={fields.model} autoComplete="off" />
      <TextInput
        label="Model year"
        isOptional
        name="modelYear"
        inputMode="numeric"
        maxLength={4}
        defaultValue={typed.modelYear}
        error={fields.modelYear}
        className="max-w-40"
      />
      <Select
        label="Kind of machine"
        name="kind"
        value={kind}
        onChange={(event) => setKind(event.target.value)}
        options={[{ value: '', label: 'Choose' }, ...kinds]}
        error={fields.kind}
        hint="Decides which schedule and spec sheet it starts with."
      />
    </FormPart>
  );
}

export function OdometerFields({ typed, fields, zones }: PartProps & { zones: string[] }) {
  const [unit, setUnit] = useState(typed.distanceUnit ?? '[mi_i]');
  const [zone, setZone] = useState(typed.timeZone ?? 'UTC');
  return (
    <FormPart title="How it is read">
      <Segments
        label="Its odometer counts"
        name="distanceUnit"
        options={distanceOptions}
        value={unit}
        onChange={setUnit}
        error={fields.distanceUnit}
      />
      <Select
        label="Time zone of the garage"
        name="timeZone"
        value={zone}
        onChange={(event) => setZone(event.target.value)}
        options={zones.map((name) => ({ value: name, label: name.replaceAll('_', ' ') }))}
        error={fields.timeZone}
      />
    </FormPart>
  );
}
