'use client';

import { useActionState } from 'react';
import { Notice } from '@/components/ui/notice';
import { SubmitButton } from '@/components/ui/submit-button';
import { emptyForm, type FormState } from '@/lib/form-state';
import { IdentityFields } from './identity-fields';
import { MakeFields, OdometerFields } from './make-fields';
import { RecordStartFields } from './record-start-fields';
import { WarrantyFields } from './warranty-fields';

export interface MachineFormProps {
  action: (previous: FormState, form: FormData) => Promise<FormState>;
  /** The id it will have, so that sending the form twice sets up one machine. */
  machine: string;
  kinds: { value: string; label: string }[];
  zones: string[];
  person: { timeZone: string; distanceUnit: string };
}

export function MachineForm({ action, machine, kinds, zones, person }: MachineFormProps) {
  const [state, submit] = useActionState(action, emptyForm);
  const { typed, fields } = state;
  const defaults = { distanceUnit: person.distanceUnit, timeZone: person.timeZone, ...typed };
  return (
    // React resets a form once its action has answered; a refused form keeps every choice as it was made.
    <form action={submit} onReset={(event) => event.preventDefault()} noValidate className="grid gap-5">
      <input type="hidden" name="machine" value={machine} />
      {state.message && !state.ok ? <Notice tone="gap" title={state.message} isLive /> : null}
      <MakeFields typed={defaults} fields={fields} kinds={kinds} />
      <IdentityFields typed={defaults} fields={fields} />
      <OdometerFields typed={defaults} fields={fields} zones={zones} />
      <RecordStartFields typed={defaults} fields={fields} />
      <WarrantyFields typed={defaults} fields={fields} />
      <div className="flex flex-wrap items-center gap-x-6 gap-y-3">
        <SubmitButton look="main" size="big" busyText="Setting up">
          Set up the machine
        </SubmitButton>
        <p className="tag max-w-[48ch]">
          Schedule and spec sheet start from common practice for this kind of machine. Replace each figure with your
          owner’s manual’s before you rely on it.
        </p>
      </div>
    </form>
  );
}
