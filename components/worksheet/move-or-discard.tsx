'use client';

import { useState } from 'react';
import { useDraftInScreen } from '@/components/garage/draft-context';
import { useGarage } from '@/components/garage/garage-context';
import type { Answer } from '@/components/garage/garage-api';
import { Button } from '@/components/ui/button';
import { Dialog } from '@/components/ui/dialog';
import { UserText } from '@/components/ui/user-text';
import { useWorksheet } from './worksheet-context';

function sentenceOf(answer: Answer<unknown>): string | undefined {
  if (answer.ok) return undefined;
  if (answer.why === 'refused') return answer.sentence;
  return answer.why === 'not-signed-in' ? 'Sign in first.' : 'This needs signal. Try again where there is some.';
}

/** For a worksheet begun on the wrong machine, or begun for nothing. */
export function MoveOrDiscard() {
  const { garage, view } = useGarage();
  const { opened } = useDraftInScreen();
  const { machine } = useWorksheet();
  const [isAsking, setIsAsking] = useState(false);
  const [problem, setProblem] = useState<string>();
  const others = view.snapshot?.machines.filter(({ id }) => id !== machine?.id) ?? [];
  async function move(subject: string) {
    if (garage) setProblem(sentenceOf(await garage.move(opened, subject)));
  }
  async function discard() {
    const answer = await garage?.discard(opened);
    setIsAsking(false);
    if (!answer?.ok) setProblem(answer && sentenceOf(answer));
    else window.location.replace('#list');
  }
  return (
    <section aria-label="Wrong machine, or begun for nothing" className="border-t border-line pt-3">
      <div className="flex flex-wrap gap-2.5">
        {others.map(({ id, name }) => (
          <Button key={id} size="big" onClick={() => void move(id)}>
            <span>
              Move to <UserText>{name}</UserText>
            </span>
          </Button>
        ))}
        <Button look="quiet" size="big" onClick={() => setIsAsking(true)}>
          Discard this worksheet
        </Button>
      </div>
      <p role="status" className="tone-gap mt-1">
        {problem}
      </p>
      <Dialog
        title="Discard this worksheet?"
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
    </section>
  );
}
