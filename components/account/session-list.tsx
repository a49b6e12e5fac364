'use client';

import { useActionState } from 'react';
import { Notice } from '@/components/ui/notice';
import { SubmitButton } from '@/components/ui/submit-button';
import { emptyForm } from '@/lib/form-state';
import type { FormAction } from './form-shell';

export interface SessionLine {
  id: string;
  device: string;
  begun: string;
  seen: string;
  isThisOne: boolean;
}

export interface SessionListProps {
  sessions: SessionLine[];
  endOne: FormAction;
  endOthers: FormAction;
}

/** Where the person is signed in, and the way to end it from here. */
export function SessionList({ sessions, endOne, endOthers }: SessionListProps) {
  const [one, submitOne] = useActionState(endOne, emptyForm);
  const [others, submitOthers] = useActionState(endOthers, emptyForm);
  const message = others.message ?? one.message;
  return (
    <div className="grid gap-4">
      {message ? <Notice isLive>{message}</Notice> : null}
      <ul className="-my-3">
        {sessions.map(({ id, device, begun, seen, isThisOne }) => (
          <li
            key={id}
            className="flex flex-wrap items-center justify-between gap-x-6 gap-y-2 border-b border-line py-3 last:border-b-0"
          >
            <div>
              <p className="font-medium">
                {device}
                {isThisOne ? ' (this one)' : ''}
              </p>
              <p className="tag">
                Signed in {begun}, last seen {seen}
              </p>
            </div>
            {isThisOne ? null : (
              <form action={submitOne}>
                <input type="hidden" name="session" value={id} />
                <SubmitButton busyText="Ending" aria-label={`End the session of ${device}, signed in ${begun}`}>
                  End
                </SubmitButton>
              </form>
            )}
          </li>
        ))}
      </ul>
      {sessions.length > 1 ? (
        <form action={submitOthers} className="border-t border-line pt-4">
          <SubmitButton busyText="Ending">End all others</SubmitButton>
        </form>
      ) : null}
    </div>
  );
}
