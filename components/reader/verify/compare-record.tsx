'use client';

import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { classes } from '@/components/ui/classes';
import { controlClasses, Field } from '@/components/ui/field';
import { Notice } from '@/components/ui/notice';
import { ProgressBar } from '@/components/ui/progress-bar';
import type { Checked } from './check-file';
import { ComparisonPart } from './comparison-part';
import { loadChecker } from './load-checker';
import { useCheck } from './use-check';

export interface CompareRecordProps {
  /** Where today's record.json is fetched from. */
  bundle: string;
  /** An entry of which it is said whether it stood in the older file already. */
  entry?: { log: string; seq: number };
}

/** Compares an older packet that somebody kept with the record as it stands today, in this browser. */
export function CompareRecord(props: CompareRecordProps) {
  const [isOpen, setIsOpen] = useState(false);
  return (
    <section aria-label="Compare an older packet with this record" className="not-printed mt-8">
      {isOpen ? (
        <CompareForm {...props} />
      ) : (
        <Button look="quiet" className="-ml-4" onClick={() => setIsOpen(true)}>
          Compare an older packet with this record
        </Button>
      )}
    </section>
  );
}

/** Loaded only for whoever wants it: the check is most of a megabyte. */
function CompareForm({ bundle, entry }: CompareRecordProps) {
  const { state, check, cancel } = useCheck(loadChecker);
  const [trouble, setTrouble] = useState<string | null>(null);
  const compare = async (older: File) => {
    setTrouble(null);
    try {
      const answer = await fetch(bundle);
      if (!answer.ok) throw new Error(String(answer.status));
      const file = new File([await answer.blob()], 'record.json');
      check({ file, key: '', against: older, roots: null, ...(entry === undefined ? {} : { place: entry }) });
    } catch {
      setTrouble('Today’s record could not be fetched, so nothing was compared. Look for a connection, then choose the file again.');
    }
  };
  const answer = state.at === 'done' ? state.answer : null;
  return (
    <div className="grid max-w-[70ch] gap-4">
      <h2>Compare an older packet with this record</h2>
      <Field
        label="Older packet, export, record.json or signed checkpoint"
        hint="It stays on this device and is compared here with the record as it stands today. Both answers come from this installation: to depend on it for nothing, download record.json and compare with verify.html or verify.mjs."
        error={answer?.kind === 'refused' ? answer.sentence : (trouble ?? undefined)}
      >
        {(control) => (
          <input
            {...control}
            type="file"
            disabled={state.at === 'loading'}
            className={classes(controlClasses, 'min-h-11 py-2')}
            onChange={(event) => {
              const [older] = event.target.files ?? [];
              if (older !== undefined) void compare(older);
            }}
          />
        )}
      </Field>
      <div aria-live="polite">
        {state.at === 'checking' ? (
          <div className="grid justify-items-start gap-3">
            <div className="w-full">
              <ProgressBar label="Comparing" text={state.stage} />
            </div>
            <Button onClick={cancel}>Stop</Button>
          </div>
        ) : null}
        {state.at === 'failed' ? <Notice tone="gap" title={state.sentence} /> : null}
        {answer?.kind === 'found' ? <Compared checked={answer} entry={entry} /> : null}
      </div>
    </div>
  );
} // prettier-ignore

function Compared({ checked, entry }: { checked: Checked; entry: CompareRecordProps['entry'] }) {
  const { finding, isSwapped, stood } = checked;
  // Only the two files in their places answer the question that was asked.
  if (isSwapped || finding.against === null) {
    return <Notice tone="gap" title={`Nothing was compared. ${finding.sentence}`} />;
  }
  const isAltered = finding.alterations.some(({ code }) => code !== 'forked');
  return (
    <>
      {isAltered ? (
        <Notice tone="gap" title="Today’s record is not as it was sealed">
          Download record.json and check it: the page for checking names what is altered.
        </Notice>
      ) : null}
      <ComparisonPart comparison={finding.against} />
      {entry === undefined || finding.against.result === 'not-comparable' ? null : (
        <p className="mt-3 font-medium">{stoodWords(entry.seq, stood)}</p>
      )}
    </>
  );
}

function stoodWords(seq: number, stood: boolean | null): string {
  if (stood === null) return `Whether entry ${seq} stood in the older file cannot be told from it.`;
  return stood
    ? `Entry ${seq} stood in the older file already, the same to the last bit.`
    : `Entry ${seq} did not stand in the older file as it stands here.`;
}
