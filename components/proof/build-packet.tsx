'use client';

import { FormShell, type FormAction } from '@/components/account/form-shell';
import { TextInput } from '@/components/ui/text-input';
import type { Openable } from '@/lib/services/what-can-be-opened';
import { ScopeChoice } from './scope/scope-choice';

export interface BuildPacketProps {
  action: FormAction;
  machine: string;
  openable: Openable;
  /** The page that shows what a reader would see. */
  preview: string;
}

/** Asks for a packet of the record as it stands now. */
export function BuildPacket({ action, machine, openable, preview }: BuildPacketProps) {
  return (
    <FormShell action={action} submit="Build a packet" busy="Asking for it" label="Build a packet">
      {({ fields, typed }) => (
        <>
          <input type="hidden" name="machine" value={machine} />
          <TextInput
            label="What it is for"
            name="purpose"
            isOptional
            hint="Printed on the cover: “a warranty claim on the gearbox”."
            autoComplete="off"
            maxLength={200}
            defaultValue={typed.purpose}
            error={fields.purpose}
          />
          <ScopeChoice openable={openable} preview={preview} errors={fields} />
        </>
      )}
    </FormShell>
  );
}
