'use client';

import { useActionState } from 'react';
import dynamic from 'next/dynamic';
import { MonoCopy } from '@/components/reader/mono-copy';
import { Notice } from '@/components/ui/notice';
import { Segments } from '@/components/ui/segments';
import { SubmitButton } from '@/components/ui/submit-button';
import { TextInput } from '@/components/ui/text-input';
import { emptyForm, type FormState } from '@/lib/form-state';
import type { Openable } from '@/lib/services/what-can-be-opened';
import { ScopeChoice } from './scope/scope-choice';

// Only drawn once an address is there.
const QrCode = dynamic(() => import('./qr-code').then((part) => part.QrCode), { ssr: false });

type FormAction = (previous: FormState, form: FormData) => Promise<FormState>;

const lasts = [
  { value: '30-days', label: '30 days' },
  { value: '90-days', label: '90 days' },
  { value: '1-year', label: '1 year' },
  { value: 'until-revoked', label: 'Until revoked' },
];

export interface MakeLinkProps {
  action: FormAction;
  machine: string;
  openable: Openable;
  /** The page that shows what a reader would see. */
  preview: string;
}

/** Makes a viewing link and shows its address, once: only a hash of it is kept. */
export function MakeLink({ action, machine, openable, preview }: MakeLinkProps) {
  const [state, submit] = useActionState(action, emptyForm);
  return (
    <>
      {state.ok && state.message ? <NewAddress url={state.message} /> : null}
      <form action={submit} noValidate aria-label="Make a viewing link" className="grid gap-4">
        <input type="hidden" name="machine" value={machine} />
        {!state.ok && state.message ? (
          <Notice tone="gap" isLive>
            {state.message}
          </Notice>
        ) : null}
        <TextInput
          label="For whom"
          name="label"
          hint="Only you see this: “Brandywell Powersports, gearbox”."
          autoComplete="off"
          maxLength={80}
          defaultValue={state.typed.label}
          error={state.fields.label}
        />
        <Segments
          label="It opens the record for"
          name="lasts"
          options={lasts}
          defaultValue={state.typed.lasts ?? '90-days'}
          error={state.fields.lasts}
          hint="One that lasts until revoked also hands out the newest packet that opens the same, with that packet’s own link."
          isWide
        />
        <ScopeChoice openable={openable} preview={preview} errors={state.fields} />
        <div>
          <SubmitButton busyText="Making it">Make a viewing link</SubmitButton>
        </div>
      </form>
    </>
  );
}

function NewAddress({ url }: { url: string }) {
  return (
    <div className="mb-5">
      <Notice title="The viewing link is made. Its address is shown now and never again." isLive>
        <div className="mt-2 flex flex-wrap items-start gap-x-5 gap-y-3">
          <QrCode text={url} title="QR code of the viewing link’s address" />
          <div className="min-w-0 flex-1 basis-52">
            <MonoCopy text={url} what="address" />
            <p className="tag mt-2">
              Whoever has this address can read what it opens until it ends or you revoke it. If it is lost, make
              another.
            </p>
          </div>
        </div>
      </Notice>
    </div>
  );
}
