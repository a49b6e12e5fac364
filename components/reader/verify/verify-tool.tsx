'use client';

import { useState } from 'react';
import { useDropzone } from 'react-dropzone';
import { Button } from '@/components/ui/button';
import { classes } from '@/components/ui/classes';
import { Field, controlClasses } from '@/components/ui/field';
import { Notice } from '@/components/ui/notice';
import { ProgressBar } from '@/components/ui/progress-bar';
import { TextInput } from '@/components/ui/text-input';
import { FindingReport } from './finding-report';
import { useCheck } from './use-check';
import { usePublishedKeys } from './use-published-keys';

/** Checks a packet or record.json in the reader's own browser; nothing of it is sent anywhere. */
export function VerifyTool() {
  const { state, check } = useCheck();
  const published = usePublishedKeys();
  const [file, setFile] = useState<File | null>(null);
  const [older, setOlder] = useState<File | null>(null);
  const [key, setKey] = useState('');
  const take = (given: File | null, against = older) => {
    setFile(given);
    if (given !== null) check({ file: given, key, against });
  };
  const { getRootProps, getInputProps, open, isDragActive } = useDropzone({
    multiple: false,
    noClick: true,
    noKeyboard: true,
    onDrop: (files) => take(files[0] ?? null),
  });
  const refused = state.at === 'done' && state.answer.kind === 'refused' ? state.answer : null;
  return (
    <>
      <div className="not-printed grid gap-5">
        <div
          {...getRootProps({
            className: classes(
              'grid justify-items-start gap-3 border-[1.5px] border-dashed p-4 sm:p-6',
              isDragActive ? 'border-petrol bg-sheet' : 'border-edge',
            ),
          })}
        >
          <input {...getInputProps({ 'aria-label': 'Packet or record.json' })} />
          <p>Drop a packet (PDF) or a record.json here.</p>
          <Button look="main" size="big" onClick={open}>
            {file === null ? 'Choose a file' : 'Choose another file'}
          </Button>
          <LoadWords at={state.at} />
        </div>
        <details open={refused !== null || undefined}>
          <summary className="link inline-flex min-h-11 items-center">
            Add a key you trust, or an older file of the same record
          </summary>
          <form
            className="mt-2 grid max-w-[44rem] gap-5"
            onSubmit={(event) => {
              event.preventDefault();
              take(file);
            }}
          >
            <TextInput
              label="Key, or its fingerprint"
              isOptional
              hint="From a mail about this record, an older packet, or the people who made it. Without one, the key in the file itself is used."
              spellCheck={false}
              autoComplete="off"
              value={key}
              onChange={(event) => setKey(event.target.value)}
              error={refused?.field === 'key' ? refused.sentence : undefined}
            />
            <Field
              label="Older packet, record.json or signed checkpoint"
              isOptional
              hint="Whatever it holds must stand unchanged in the newer one."
              error={refused?.field === 'against' ? refused.sentence : undefined}
            >
              {(control) => (
                <input
                  {...control}
                  type="file"
                  className={classes(controlClasses, 'min-h-11 py-2')}
                  onChange={(event) => setOlder(event.target.files?.[0] ?? null)}
                />
              )}
            </Field>
            <div>
              <Button type="submit" disabled={file === null}>
                Check again with these
              </Button>
            </div>
          </form>
        </details>
      </div>
      <div aria-live="polite" className="mt-6">
        {state.at === 'checking' ? <ProgressBar label={`Checking ${state.name}`} text={state.stage} /> : null}
        {state.at === 'failed' ? <Notice tone="gap" title={state.sentence} /> : null}
        {refused === null ? null : (
          <Notice tone="gap" title="Nothing was checked yet">
            {refused.sentence}
          </Notice>
        )}
      </div>
      {state.at === 'done' && state.answer.kind === 'found' ? (
        <FindingReport
          name={state.name}
          finding={state.answer.finding}
          container={state.answer.container}
          published={published}
        />
      ) : null}
    </>
  );
}

function LoadWords({ at }: { at: string }) {
  return (
    <p className="tag" role="status">
      {at === 'loading'
        ? 'Loading the check.'
        : 'Ready. The file stays on this device; from now on the check works without a connection too.'}
    </p>
  );
}
