'use client';

import { useState } from 'react';
import { DiscardDraft, sentenceOf } from '@/components/garage/discard-draft';
import { useDraftInScreen } from '@/components/garage/draft-context';
import { useGarage } from '@/components/garage/garage-context';
import { Button } from '@/components/ui/button';
import { UserText } from '@/components/ui/user-text';
import { useWorksheet } from './worksheet-context';

/** For a worksheet begun on the wrong machine, or begun for nothing. */
export function MoveOrDiscard() {
  const { garage, view } = useGarage();
  const { opened } = useDraftInScreen();
  const { machine } = useWorksheet();
  const [problem, setProblem] = useState<string>();
  const others = view.snapshot?.machines.filter(({ id }) => id !== machine?.id) ?? [];
  async function move(subject: string) {
    if (garage) setProblem(sentenceOf(await garage.move(opened, subject)));
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
        <DiscardDraft what="worksheet" onProblem={setProblem} />
      </div>
      <p role="status" className="tone-gap mt-1">
        {problem}
      </p>
    </section>
  );
}
