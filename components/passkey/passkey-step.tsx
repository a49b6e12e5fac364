'use client';

import { WebAuthnAbortService } from '@simplewebauthn/browser';
import { useRouter } from 'next/navigation';
import { useEffect, useEffectEvent, useState } from 'react';
import type { FormAction } from '@/components/account/form-shell';
import { Notice } from '@/components/ui/notice';
import { emptyForm, type PasskeyQuestion } from '@/lib/form-state';
import { askPasskey } from './ask-passkey';

export interface PasskeyStepProps {
  /** Each new one is put to the authenticator at once. */
  question: PasskeyQuestion | undefined;
  /** Takes the answer: fields `challenge` and `response`. */
  finish: FormAction;
  /** Further fields for `finish`. */
  fields?: Record<string, string>;
  /** What stands when the person cancels: "The entry is sealed and stays so." */
  ifRefused?: string;
  /** The answer was taken. */
  onDone?: (question: PasskeyQuestion) => void;
}

/** The second half of a form that needs the person's authenticator: asks it, sends the answer, says how it went. */
export function PasskeyStep({ question, finish, fields = {}, ifRefused = '', onDone }: PasskeyStepProps) {
  const router = useRouter();
  const [settled, settle] = useState<{ id: string; words: string; isDone: boolean } | null>(null);

  const send = useEffectEvent(async (asked: PasskeyQuestion, response: string) => {
    const { id } = asked;
    const form = new FormData();
    for (const [name, value] of Object.entries({ ...fields, challenge: id, response })) form.append(name, value);
    const lost = 'The answer of your key did not reach the server. Press the button again.';
    const state = await finish(emptyForm, form).catch(() => ({ ...emptyForm, message: lost }));
    settle({ id, words: state.message ?? '', isDone: state.ok });
    if (!state.ok) return;
    onDone?.(asked);
    router.refresh();
  });
  useEffect(() => {
    if (question === undefined) return;
    const { id } = question;
    void askPasskey(question).then((answer) => {
      if ('response' in answer) return send(question, answer.response);
      settle({ id, words: answer.refusal, isDone: false });
    });
  }, [question]);
  useEffect(() => () => WebAuthnAbortService.cancelCeremony(), []);

  if (question === undefined) return null;
  if (settled?.id !== question.id) {
    return (
      <Notice title="Answer the prompt of your browser" isLive>
        It asks for your key, and the key asks who you are. Nothing is done before it has answered.
        <noscript> Your browser runs no scripts, so no key can be asked. Go on without a key.</noscript>
      </Notice>
    );
  }
  if (settled.words === '') return null;
  return (
    <Notice tone={settled.isDone ? 'plain' : 'gap'} title={settled.words} isLive>
      {settled.isDone || ifRefused === '' ? null : ifRefused}
    </Notice>
  );
}
