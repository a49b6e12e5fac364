'use client';

import { useActionState } from 'react';
import useSWR from 'swr';
import type { FormAction } from '@/components/account/form-shell';
import { Sheet } from '@/components/ui/box';
import { Notice } from '@/components/ui/notice';
import { ProgressBar } from '@/components/ui/progress-bar';
import { SubmitButton } from '@/components/ui/submit-button';
import { formatInstant } from '@/lib/domain/instants';
import { emptyForm } from '@/lib/form-state';
import { paths } from '@/lib/paths';
import type { RecordCheckState } from '@/lib/services/run-record-check';

const askEveryMilliseconds = 700;
const stages = { database: 'The database file', records: 'Entries', files: 'Files' } as const;

async function readCheck(address: string): Promise<RecordCheckState> {
  const response = await fetch(address, { headers: { accept: 'application/json' } });
  const answer = (await response.json()) as { check?: RecordCheckState; title?: string };
  if (answer.check === undefined) throw new Error(answer.title ?? 'The check’s progress could not be read.');
  return answer.check;
}

export interface RecordCheckProps {
  action: FormAction;
  initial: RecordCheckState;
  zone: string;
}

/** Checks every record on a button, shows how far it is, and what the last check found. */
export function RecordCheck({ action, initial, zone }: RecordCheckProps) {
  const { data, mutate } = useSWR<RecordCheckState, Error>(paths.api.recordCheck, readCheck, {
    fallbackData: initial,
    refreshInterval: (shown = initial) => (shown.running === null ? 0 : askEveryMilliseconds),
    revalidateOnFocus: false,
    revalidateOnMount: initial.running !== null,
  });
  const [state, submit] = useActionState(async (...call: Parameters<FormAction>) => {
    const answer = await action(...call);
    await mutate();
    return answer;
  }, emptyForm);
  const { running, last, failed } = data ?? initial;
  return (
    <div className="grid gap-4">
      <div aria-live="polite" className="grid gap-4">
        {running === null ? (
          <LastCheck last={last} zone={zone} />
        ) : (
          <div className="max-w-[36rem]">
            <ProgressBar
              label={stages[running.stage]}
              value={running.of === 0 ? 1 : running.done / running.of}
              text={running.stage === 'database' ? 'being read' : `${running.done} of ${running.of}`}
            />
          </div>
        )}
        {failed === null ? null : (
          <Notice tone="gap" title="The last check was not finished.">
            {failed}
          </Notice>
        )}
      </div>
      <form action={submit}>
        {!state.ok && state.message ? (
          <Notice tone="gap" isLive>
            {state.message}
          </Notice>
        ) : null}
        <SubmitButton busyText="Beginning" disabled={running !== null}>
          Check every record
        </SubmitButton>
      </form>
    </div>
  );
}

function LastCheck({ last, zone }: { last: RecordCheckState['last']; zone: string }) {
  if (last === null) return <p className="tag">No check has been made from here yet.</p>;
  const { entries, logs, files, bytes, problemCount, problems, finishedAt } = last;
  const looked = `${entries} entries of ${logs} logs and ${files} files (${(bytes / 1e6).toFixed(1)} MB), ${formatInstant(finishedAt, zone)}.`;
  if (problemCount === 0) return <Notice title="Everything was as it was sealed.">{looked}</Notice>;
  return (
    <>
      <Notice tone="gap" title={`${problemCount} ${problemCount === 1 ? 'thing is' : 'things are'} not as sealed.`}>
        <p>{looked}</p>
        <p>
          Stop the server, keep a copy of the data folder as it is, and restore the newest backup that a check finds in
          order. Owners’ packets and mails show what was sealed.
        </p>
      </Notice>
      <Sheet>
        <ul role="list" className="divide-y divide-hair">
          {problems.slice(0, 50).map(({ log, seq, sentence, technical }, index) => (
            <li key={index} className="px-4 py-3">
              <p>{sentence}</p>
              <p className="tag break-all">
                {log === undefined ? '' : `Log ${log}${seq === undefined ? '' : `, entry ${seq}`}. `}
                {technical.slice(0, 300)}
              </p>
            </li>
          ))}
        </ul>
      </Sheet>
      {problemCount > 50 ? (
        <p className="tag">The first 50 are shown; npm run check-records names the first 500.</p>
      ) : null}
    </>
  );
}
