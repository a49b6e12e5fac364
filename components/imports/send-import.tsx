'use client';

import { useRouter } from 'next/navigation';
import { useRef, useState } from 'react';
import { useDropzone } from 'react-dropzone';
import { Button } from '@/components/ui/button';
import { classes } from '@/components/ui/classes';
import { FieldError } from '@/components/ui/field';
import { ProgressBar } from '@/components/ui/progress-bar';
import { bytesWords } from '@/components/entry/words';
import { paths } from '@/lib/paths';
import { sendFileTo } from './send-file-to';

type State =
  | { at: 'ready'; refusal?: string }
  | { at: 'sending'; name: string; share: number; bytes: number }
  | { at: 'checking'; name: string };

/** The largest ZIP that is taken in. */
const mostBytes = 1_000_000_000;

/** Sends an export and says how far it is; what was found in it has a page of its own. */
export function SendImport() {
  const router = useRouter();
  const [state, setState] = useState<State>({ at: 'ready' });
  const stop = useRef<() => void>(undefined);
  const take = (file: File | undefined) => {
    if (file === undefined || state.at !== 'ready') return;
    if (file.size > mostBytes) {
      setState({ at: 'ready', refusal: `${file.name} is over 1 GB, which is more than is taken in.` });
      return;
    }
    const { name, size: bytes } = file;
    setState({ at: 'sending', name, share: 0, bytes });
    const sending = sendFileTo(`${paths.api.imports}?name=${encodeURIComponent(name)}`, file, (share) =>
      setState(share < 1 ? { at: 'sending', name, share, bytes } : { at: 'checking', name }),
    );
    stop.current = sending.stop;
    void sending.answer.then((answer) => {
      if (answer.id !== undefined) router.push(paths.stagedImport(answer.id));
      else setState({ at: 'ready', ...(answer.refusal === undefined ? {} : { refusal: answer.refusal }) });
    });
  };
  const { getRootProps, getInputProps, open, isDragActive } = useDropzone({
    multiple: false,
    noClick: true,
    noKeyboard: true,
    onDrop: (files) => take(files[0]),
  });
  return (
    <div
      {...getRootProps({
        className: classes(
          'grid gap-3 border-[1.5px] border-dashed p-4 sm:p-6',
          isDragActive ? 'border-petrol bg-sheet' : 'border-edge',
        ),
      })}
    >
      <input {...getInputProps({ 'aria-label': 'Export (ZIP)' })} />
      <div aria-live="polite" className="grid gap-3">
        {state.at === 'ready' ? <p>Drop an export (ZIP) here, up to 1 GB.</p> : null}
        {state.at === 'sending' ? (
          <ProgressBar
            label={`Sending ${state.name}`}
            value={state.share}
            text={`${Math.floor(state.share * 100)} % of ${bytesWords(state.bytes)}`}
          />
        ) : null}
        {state.at === 'checking' ? (
          <ProgressBar label={`Checking ${state.name}`} text="Every line, seal, part and file" />
        ) : null}
      </div>
      <div>
        {state.at === 'ready' ? (
          <Button look="main" size="big" onClick={open}>
            Choose the file
          </Button>
        ) : (
          <Button onClick={() => stop.current?.()}>Stop</Button>
        )}
      </div>
      <FieldError id="import-refused" error={state.at === 'ready' ? state.refusal : undefined} />
    </div>
  );
}
