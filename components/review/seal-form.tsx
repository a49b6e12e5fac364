'use client';

import { useActionState } from 'react';
import { Notice } from '@/components/ui/notice';
import { SubmitButton } from '@/components/ui/submit-button';
import { emptyForm, type FormState } from '@/lib/form-state';

export interface SealFormProps {
  action: (previous: FormState, form: FormData) => Promise<FormState>;
  worksheet: string;
  /** Fingerprint of the entry shown above; anything else is not sealed in its place. */
  reviewed: string;
  isReady: boolean;
  seq: number;
  /** The person has a key of their own to sign with. */
  hasKey: boolean;
}

/** The one act that makes a worksheet an entry. */
export function SealForm({ action, worksheet, reviewed, isReady, seq, hasKey }: SealFormProps) {
  const [state, submit] = useActionState(action, emptyForm);
  return (
    <form action={submit} className="mt-8 grid justify-items-start gap-3">
      <input type="hidden" name="worksheet" value={worksheet} />
      <input type="hidden" name="reviewed" value={reviewed} />
      {state.message && !state.ok ? (
        <Notice tone="gap" title={state.message} isLive>
          <ul>
            {Object.entries(state.fields).map(([field, sentence]) => (
              <li key={field}>{sentence}</li>
            ))}
          </ul>
        </Notice>
      ) : null}
      <div className="flex flex-wrap items-center gap-3">
        <SubmitButton
          look="seal"
          size="big"
          busyText="Sealing"
          disabled={!isReady}
          {...(hasKey ? { name: 'sign', value: 'yes' } : {})}
        >
          {hasKey ? 'Seal and sign with my key' : `Seal as entry ${seq}`}
        </SubmitButton>
        {hasKey ? (
          <SubmitButton look="quiet" size="big" busyText="Sealing" disabled={!isReady}>
            Seal as entry {seq}, unsigned
          </SubmitButton>
        ) : null}
      </div>
      <p className="tag max-w-[60ch]">
        {isReady
          ? `The server notes its time, hashes the entry, links it to the one before and signs. A time stamp follows by itself.${hasKey ? ' Then your key is asked; if you cancel, the entry stays sealed.' : ''}`
          : 'It can be sealed once the lines above are put right. Gaps need not be mended: they are recorded as they are.'}
      </p>
    </form>
  );
}
