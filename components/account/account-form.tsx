'use client';

import { Select, type SelectOption } from '@/components/ui/select';
import { TextInput } from '@/components/ui/text-input';
import { FormShell, type FormAction } from './form-shell';

export interface AccountFormProps {
  action: FormAction;
  account: {
    name: string;
    email: string;
    distanceUnit: string;
    volumeUnit: string;
    torqueUnit: string;
    timeZone: string;
  };
  units: Record<'distance' | 'volume' | 'torque', SelectOption[]>;
  timeZones: string[];
}

export function AccountForm({ action, account, units, timeZones }: AccountFormProps) {
  const selects = [
    { name: 'distanceUnit', label: 'Distance', options: units.distance },
    { name: 'volumeUnit', label: 'Volume', options: units.volume },
    { name: 'torqueUnit', label: 'Torque', options: units.torque },
    { name: 'timeZone', label: 'Time zone', options: timeZones.map((zone) => ({ value: zone, label: zone })) },
  ] as const;
  return (
    <FormShell action={action} submit="Keep changes" busy="Keeping them" look="plain" label="Name and units">
      {({ fields, typed }) => (
        <>
          <TextInput
            label="Name"
            name="name"
            autoComplete="name"
            required
            defaultValue={typed.name ?? account.name}
            error={fields.name}
            hint="Entries sealed before keep the name they were sealed with."
          />
          <div className="grid gap-5 sm:grid-cols-2">
            {selects.map(({ name, label, options }) => {
              const value = typed[name] ?? account[name];
              return (
                <Select
                  key={`${name} ${value}`}
                  label={label}
                  name={name}
                  defaultValue={value}
                  error={fields[name]}
                  options={[...options]}
                />
              );
            })}
          </div>
        </>
      )}
    </FormShell>
  );
}
