'use client';

import { FormShell, type FormAction } from '@/components/account/form-shell';
import { TextInput } from '@/components/ui/text-input';

export interface DecideImportProps {
  id: string;
  keep: FormAction;
  discard: FormAction;
  recheck: FormAction;
  /** False: it may not be kept, or is kept already. */
  canKeep: boolean;
  canRecheck: boolean;
}

/** Keep it, throw it away, or check it with a key from elsewhere first. */
export function DecideImport({ id, keep, discard, recheck, canKeep, canRecheck }: DecideImportProps) {
  const hidden = <input type="hidden" name="import" value={id} />;
  // Of a file that may not be kept, nothing is here to be thrown away but what was found.
  const dismiss = canRecheck ? 'Do not keep it' : 'Done';
  return (
    <div className="not-printed grid max-w-[44rem] gap-6">
      <div className="flex flex-wrap gap-2.5">
        {canKeep ? (
          <FormShell action={keep} submit="Keep it, read-only" busy="Keeping it" look="main" label="Keep it">
            {() => hidden}
          </FormShell>
        ) : null}
        <FormShell action={discard} submit={dismiss} busy="Removing it" look="plain" label={dismiss}>
          {() => hidden}
        </FormShell>
      </div>
      {canRecheck ? (
        <FormShell
          action={recheck}
          submit="Check with this key"
          busy="Checking"
          look="plain"
          label="Check with a key from elsewhere"
        >
          {({ fields, typed }) => (
            <>
              {hidden}
              <TextInput
                label="Key, or its fingerprint"
                name="key"
                isOptional
                hint="From a mail about this record, a printed packet, or the people who keep it there. Without one, the key in the file itself is used."
                spellCheck={false}
                autoComplete="off"
                defaultValue={typed.key}
                error={fields.key}
              />
            </>
          )}
        </FormShell>
      ) : null}
    </div>
  );
}
