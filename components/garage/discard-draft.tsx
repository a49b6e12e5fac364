'use client';

import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { Dialog } from '@/components/ui/dialog';
import { useDraftInScreen } from './draft-context';
import type { Answer } from './garage-api';
import { useGarage } from './garage-context';

/** Why something that needs the server was not done; undefined when it was. */
export function sentenceOf(answer: Answer<unknown>): string | undefined {
  if (answer.ok) return undefined;
  if (answer.why === 'refused') return answer.sentence;
  return answer.why === 'not-signed-in' ? 'Sign in first.' : 'This needs signal. Try again where there is some.';
}

interface DiscardDraftProps {
  what: 'worksheet' | 'receipt' | 'addendum';
  /** Where to go once it is gone; the list of the garage, if nothing else. */
  leaveTo?: string;
  onProblem: (sentence: string | undefined) => void;
}

/** Asks once, then takes the draft off every list. */
export function DiscardDraft({ what, leaveTo = '#list', onProblem }: DiscardDraftProps) {
  const { garage } = useGarage();
  const { opened } = useDraftInScreen();
  const [isAsking, setIsAsking] = useState(false);
  async function discard() {
    const answer = await garage?.discard(opened);
    setIsAsking(false);
    const problem = answer && sentenceOf(answer);
    onProblem(problem);
    if (problem === undefined) window.location.replace(leaveTo);
  }
  return (
    <>
      <Button look="quiet" size="big" onClick={() => setIsAsking(true)}>
        Discard this {what}
      </Button>
      <Dialog
        title={`Discard this ${what}?`}
        isOpen={isAsking}
        onClose={() => setIsAsking(false)}
        closeText="Keep it"
        actions={
          <Button size="big" onClick={() => void discard()}>
            Discard
          </Button>
        }
      >
        <p>What was typed and photographed here leaves your lists. Nothing of it has been sealed.</p>
      </Dialog>
    </>
  );
}
