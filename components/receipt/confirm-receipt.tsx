'use client';

import { useState } from 'react';
import { DiscardDraft } from '@/components/garage/discard-draft';
import { useDraftInScreen } from '@/components/garage/draft-context';
import type { Failure } from '@/components/garage/garage-api';
import { useGarage } from '@/components/garage/garage-context';
import { photosOf } from '@/components/garage/photos-of';
import { Dock } from '@/components/shell/dock';
import { Button } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';

interface ConfirmReceiptProps {
  onTry: () => void;
  onRefused: (fields: Record<string, string>) => void;
}

function sentenceOf(failure: Failure): string {
  if (failure.why === 'refused') return failure.sentence;
  if (failure.why === 'not-signed-in') return 'Sign in to seal it. Everything is kept on this phone.';
  return 'Sealing needs signal. Everything is kept on this phone; confirm it where there is some.';
}

/** The button is docked, so what it complains about may be far off. */
function showFirstProblem(): void {
  const field = document.querySelector<HTMLElement>('main [aria-invalid=true]');
  field?.scrollIntoView({ block: 'center' });
  field?.focus({ preventScroll: true });
}

/** Sealing the purchase on the shelf, once all of it has been sent. */
export function ConfirmReceipt({ onTry, onRefused }: ConfirmReceiptProps) {
  const { garage } = useGarage();
  const { opened, view, problems } = useDraftInScreen();
  const [isBusy, setIsBusy] = useState(false);
  const [failure, setFailure] = useState<string>();
  const [isTried, setIsTried] = useState(false);
  const hasPhoto = photosOf(view).length > 0;
  const count = Object.keys(problems).length;
  async function confirm() {
    onTry();
    setIsTried(true);
    setFailure(undefined);
    if (count > 0) {
      requestAnimationFrame(showFirstProblem);
      return;
    }
    setIsBusy(true);
    const answer = await garage?.confirmReceipt(opened);
    setIsBusy(false);
    if (!answer || answer.ok) return;
    setFailure(sentenceOf(answer));
    if (answer.why === 'refused') onRefused(answer.fields);
  }
  const left = count === 1 ? 'One field needs another look.' : `${count} fields need another look.`;
  const sentence = failure ?? (isTried && count > 0 ? left : undefined);
  return (
    <div className="mt-6">
      {hasPhoto ? null : (
        <p className="tone-warn mb-3">No photo or PDF yet: a reader will see a purchase without its paper.</p>
      )}
      <DiscardDraft what="receipt" onProblem={setFailure} />
      {sentence ? (
        <Notice tone="gap" isLive>
          {sentence}
        </Notice>
      ) : null}
      <Dock>
        <Button size="big" look="seal" isBusy={isBusy} onClick={() => void confirm()}>
          {isBusy ? 'Sealing' : 'Confirm and seal on the shelf'}
        </Button>
      </Dock>
    </div>
  );
}
