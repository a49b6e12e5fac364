'use client';

import { Button } from '@/components/ui/button';
import { classes } from '@/components/ui/classes';
import { Field, controlClasses } from '@/components/ui/field';
import { TextInput } from '@/components/ui/text-input';

export interface Further {
  key: string;
  against: File | null;
  roots: File | null;
}

export interface FurtherInputsProps {
  given: Further;
  onChange: (given: Further) => void;
  refused: { field: string; sentence: string } | null;
  canCheck: boolean;
  onCheck: () => void;
}

/** What a reader brings from elsewhere: a key, an older file, roots of time-stamp authorities. None is needed. */
export function FurtherInputs({ given, onChange, refused, canCheck, onCheck }: FurtherInputsProps) {
  const errorOf = (field: string) => (refused?.field === field ? refused.sentence : undefined);
  const isOpen = refused !== null && refused.field !== 'file';
  return (
    <details open={isOpen || undefined}>
      <summary className="link inline-flex min-h-11 items-center">
        Add what you have from elsewhere: a key, an older file, roots of time stamps
      </summary>
      <form
        className="mt-2 grid max-w-[44rem] gap-5"
        onSubmit={(event) => {
          event.preventDefault();
          onCheck();
        }}
      >
        <TextInput
          label="Key, or its fingerprint"
          isOptional
          hint="From a mail about this record, an older packet, or the people who made it. Without one, the key in the file itself is used, and that proves little."
          spellCheck={false}
          autoComplete="off"
          value={given.key}
          onChange={(event) => onChange({ ...given, key: event.target.value })}
          error={errorOf('key')}
        />
        <FileField
          label="Older packet, export, record.json or signed checkpoint"
          hint="Whatever it holds must stand unchanged in the newer one. A checkpoint may be saved out of a mail as text."
          error={errorOf('against')}
          onPick={(against) => onChange({ ...given, against })}
        />
        <FileField
          label="Roots of time stamps that you trust"
          hint="One PEM file of one or more certificates, got from the time-stamp authority itself. Only a time stamp under one of them counts as proven. Certificates only, never a private key."
          accept=".pem,.crt,.cer,.der"
          error={errorOf('roots')}
          onPick={(roots) => onChange({ ...given, roots })}
        />
        <div>
          <Button type="submit" disabled={!canCheck}>
            Check again with these
          </Button>
        </div>
      </form>
    </details>
  );
}

interface FileFieldProps {
  label: string;
  hint: string;
  accept?: string;
  error: string | undefined;
  onPick: (file: File | null) => void;
}

function FileField({ label, hint, accept, error, onPick }: FileFieldProps) {
  return (
    <Field label={label} isOptional hint={hint} error={error}>
      {(control) => (
        <input
          {...control}
          type="file"
          accept={accept}
          className={classes(controlClasses, 'min-h-11 py-2')}
          onChange={(event) => onPick(event.target.files?.[0] ?? null)}
        />
      )}
    </Field>
  );
}
