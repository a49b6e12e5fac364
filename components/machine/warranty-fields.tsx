'use client';

import { useState } from 'react';
import { NumberInput } from '@/components/ui/number-input';
import { Segments } from '@/components/ui/segments';
import { TextInput } from '@/components/ui/text-input';
import { FormPart, type PartProps } from './form-part';

const kinds = [
  { value: 'factory', label: 'Factory' },
  { value: 'extended', label: 'Extended' },
];
const units = [
  { code: '[mi_i]', label: 'mi' },
  { code: 'km', label: 'km' },
];

export function WarrantyFields({ typed, fields }: PartProps) {
  const [kind, setKind] = useState(typed.warrantyKind ?? 'factory');
  const [unit, setUnit] = useState(typed.warrantyUnit ?? typed.distanceUnit ?? '[mi_i]');
  return (
    <FormPart
      title="Its warranty"
      note="Leave it empty if there is none. Enter the figures as the paper prints them; its own text decides."
    >
      <TextInput
        label="What the paper calls it"
        isOptional
        name="warrantyTitle"
        defaultValue={typed.warrantyTitle}
        error={fields.warrantyTitle}
        autoComplete="off"
      />
      <Segments label="Kind" name="warrantyKind" options={kinds} value={kind} onChange={setKind} />
      <TextInput
        label="Starts on"
        isOptional
        name="warrantyStartsOn"
        type="date"
        defaultValue={typed.warrantyStartsOn}
        error={fields.warrantyStartsOn}
      />
      <NumberInput
        label="Runs for"
        isOptional
        unit="months"
        isWhole
        name="warrantyMonths"
        defaultValue={typed.warrantyMonths}
        error={fields.warrantyMonths}
      />
      <NumberInput
        label="Or until the odometer shows"
        isOptional
        name="warrantyDistance"
        units={units}
        unitName="warrantyUnit"
        unitValue={unit}
        onUnitChange={setUnit}
        defaultValue={typed.warrantyDistance}
        error={fields.warrantyDistance}
      />
    </FormPart>
  );
}
