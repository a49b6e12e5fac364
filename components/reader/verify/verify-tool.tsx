'use client';

import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { ProgressBar } from '@/components/ui/progress-bar';
import type { LoadChecker } from './checker';
import { FileDrop } from './file-drop';
import { FindingReport } from './finding-report';
import { FurtherInputs, type Further } from './further-inputs';
import type { CheckedWith } from './this-check';
import { useCheck } from './use-check';
import type { PublishedKeys } from './use-published-keys';

export interface VerifyToolProps {
  load: LoadChecker;
  published: PublishedKeys;
  checkedWith: CheckedWith;
}

const nothingFurther: Further = { key: '', against: null, roots: null };

/** Checks a packet, an export or a record.json in the reader’s own browser; nothing of it is sent anywhere. */
export function VerifyTool({ load, published, checkedWith }: VerifyToolProps) {
  const { state, check, cancel } = useCheck(load);
  const [file, setFile] = useState<File | null>(null);
  const [further, setFurther] = useState(nothingFurther);
  const [asked, setAsked] = useState(nothingFurther);
  const take = (given: File | null) => {
    setFile(given);
    setAsked(further);
    if (given !== null) check({ file: given, ...further });
  };
  const answer = state.at === 'done' ? state.answer : null;
  const isBehind = answer?.kind === 'found' && (['key', 'against', 'roots'] as const).some((one) => further[one] !== asked[one]);
  const refused = answer?.kind === 'refused' ? answer : null;
  return (
    <>
      <div className="not-printed grid gap-5">
        <FileDrop
          hasFile={file !== null}
          isLoading={state.at === 'loading'}
          onTake={take}
          refusal={refused?.field === 'file' ? refused.sentence : undefined}
        />
        <FurtherInputs
          given={further}
          onChange={setFurther}
          refused={refused}
          canCheck={file !== null}
          onCheck={() => take(file)}
        />
      </div>
      <div aria-live="polite" className="not-printed mt-6">
        {state.at === 'checking' ? (
          <div className="grid justify-items-start gap-3">
            <div className="w-full">
              <ProgressBar label={`Checking ${state.name}`} text={state.stage} />
            </div>
            <Button onClick={cancel}>Stop</Button>
          </div>
        ) : null}
        {state.at === 'failed' ? <Notice tone="gap" title={state.sentence} /> : null}
        {isBehind ? (
          <Notice tone="warn" title="What you added or changed above is not in the report below yet">
            Press “Check again with these”.
          </Notice>
        ) : null}
        {refused === null ? null : (
          <Notice tone="gap" title={refused.isOtherKey ? 'This file was not signed with your key' : 'Nothing was checked yet'}>
            {refused.sentence}
          </Notice>
        )}
      </div>
      {state.at === 'done' && answer?.kind === 'found' ? (
        <FindingReport
          name={state.name}
          checked={answer}
          checkedAt={state.checkedAt}
          published={published}
          checkedWith={checkedWith}
        />
      ) : null}
    </>
  );
} // prettier-ignore
