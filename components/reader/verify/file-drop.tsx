'use client';

import { useDropzone } from 'react-dropzone';
import { Button } from '@/components/ui/button';
import { classes } from '@/components/ui/classes';
import { FieldError } from '@/components/ui/field';
import { maxFileWords } from './limits';

export interface FileDropProps {
  hasFile: boolean;
  isLoading: boolean;
  onTake: (file: File | null) => void;
  refusal: string | undefined;
}

/** Where the file to check is dropped or picked. */
export function FileDrop({ hasFile, isLoading, onTake, refusal }: FileDropProps) {
  const { getRootProps, getInputProps, open, isDragActive } = useDropzone({
    multiple: false,
    noClick: true,
    noKeyboard: true,
    onDrop: (files) => onTake(files[0] ?? null),
  });
  return (
    <div
      {...getRootProps({
        className: classes(
          'grid justify-items-start gap-3 border-[1.5px] border-dashed p-4 sm:p-6',
          isDragActive ? 'border-petrol bg-sheet' : 'border-edge',
        ),
      })}
    >
      <input {...getInputProps({ 'aria-label': 'Packet, export or record.json' })} />
      <p>Drop a packet (PDF), an export (ZIP) or a record.json here, up to {maxFileWords}.</p>
      <Button look="main" size="big" onClick={open}>
        {hasFile ? 'Choose another file' : 'Choose a file'}
      </Button>
      <FieldError id="file-refused" error={refusal} />
      <p className="tag" role="status">
        {isLoading
          ? 'Loading the check.'
          : 'Ready. The file stays on this device; from now on the check works without a connection too.'}
      </p>
    </div>
  );
}
