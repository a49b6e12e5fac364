'use client';

import { useActionState, useState } from 'react';
import { FormShell, type FormAction } from '@/components/account/form-shell';
import { PasskeyStep } from '@/components/passkey/passkey-step';
import { ownSignatureLimit } from '@/lib/domain/own-signature-words';
import { Button } from '@/components/ui/button';
import { Dialog } from '@/components/ui/dialog';
import { FieldError } from '@/components/ui/field';
import { Notice } from '@/components/ui/notice';
import { Segments } from '@/components/ui/segments';
import { SubmitButton } from '@/components/ui/submit-button';
import { Textarea } from '@/components/ui/textarea';
import { emptyForm } from '@/lib/form-state';

const capacities = [
  { value: 'did-the-work', label: 'Did the work' },
  { value: 'inspected', label: 'Inspected the finished work' },
  { value: 'was-present', label: 'Was present' },
  { value: 'checked-papers', label: 'Checked the papers only' },
];

/** Whether the technician can sign with a key of their own, and what takes the signature. */
export interface OwnKey {
  hasKey: boolean;
  sign: FormAction;
}

export interface AnswerFormProps {
  action: FormAction;
  invitation: string;
  shop: { id: string; name: string };
  seq: number;
  ownKey: OwnKey;
}

/** Countersign in one of four capacities, or decline. */
export function AnswerForm(props: AnswerFormProps) {
  const { action, invitation, shop, seq, ownKey } = props;
  const [state, submit] = useActionState(action, emptyForm);
  const { fields, typed } = state;
  return (
    <>
      <form action={submit} noValidate aria-label="Countersign" className="grid gap-5">
        <input type="hidden" name="invitation" value={invitation} />
        <input type="hidden" name="shop" value={shop.id} />
        <input type="hidden" name="answer" value="countersign" />
        {state.message && !state.ok ? (
          <Notice tone="gap" isLive>
            {state.message}
          </Notice>
        ) : null}
        <Segments
          label={`In which capacity does ${shop.name} vouch for entry ${seq}?`}
          name="capacity"
          options={capacities}
          defaultValue={typed.capacity}
          error={fields.capacity}
          size="big"
        />
        <Textarea
          label="Statement"
          name="statement"
          rows={4}
          hint="What you did or saw, in your own words. Say what you did not check, too."
          maxLength={2000}
          defaultValue={typed.statement}
          error={fields.statement}
        />
        <PasskeyStep
          question={state.question}
          finish={ownKey.sign}
          fields={{ invitation }}
          ifRefused="Nothing was countersigned. Press the button again, or countersign without your key."
        />
        <Submit seq={seq} hasKey={ownKey.hasKey} />
      </form>
      <Decline {...props} />
    </>
  );
}

function Submit({ seq, hasKey }: { seq: number; hasKey: boolean }) {
  const main = { look: 'seal', size: 'big', busyText: 'Countersigning' } as const;
  if (!hasKey) {
    return (
      <div className="grid justify-items-start gap-2">
        <SubmitButton {...main}>Countersign entry {seq}</SubmitButton>
        <p className="tag">Without a key of your own: readers see that no signature was made outside this server.</p>
      </div>
    );
  }
  return (
    <div className="grid justify-items-start gap-2">
      <div className="flex flex-wrap items-center gap-3">
        <SubmitButton {...main} name="sign" value="yes">
          Countersign entry {seq} and sign with my key
        </SubmitButton>
        <SubmitButton look="quiet" size="big" busyText="Countersigning">
          Countersign without my key
        </SubmitButton>
      </div>
      <p className="tag">Your key signs exactly this capacity and statement for this entry. {ownSignatureLimit}</p>
    </div>
  );
}

function Decline({ action, invitation, shop }: AnswerFormProps) {
  const [isOpen, setOpen] = useState(false);
  return (
    <div className="mt-4">
      <Button look="quiet" onClick={() => setOpen(true)}>
        Decline
      </Button>
      <Dialog title="Decline to countersign" isOpen={isOpen} onClose={() => setOpen(false)} closeText="Go back">
        <p className="mb-4">The owner is told. Nothing is added to the record.</p>
        <FormShell action={action} submit="Decline" busy="Declining" look="plain" label="Decline">
          {({ fields, typed }) => (
            <>
              <input type="hidden" name="invitation" value={invitation} />
              <input type="hidden" name="shop" value={shop.id} />
              <input type="hidden" name="answer" value="decline" />
              <Textarea
                label="Reason"
                name="reason"
                isOptional
                hint="Goes to the owner by e-mail."
                maxLength={1000}
                defaultValue={typed.reason}
                error={fields.reason}
              />
              <FieldError id="decline-shop" error={fields.shop} />
            </>
          )}
        </FormShell>
      </Dialog>
    </div>
  );
}
