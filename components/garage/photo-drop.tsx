'use client';

import { useEffect, useRef } from 'react';
import { useDropzone, type FileRejection } from 'react-dropzone';
import { Button } from '@/components/ui/button';

export interface PhotoDropProps {
  onFiles: (files: File[], refused: { name: string; why: string }[]) => void;
  /** "Photograph the receipt". */
  takeText: string;
  hasPdf?: boolean;
}

const mostBytes = 40_000_000;
const pictures = {
  'image/jpeg': ['.jpg', '.jpeg'],
  'image/png': ['.png'],
  'image/webp': ['.webp'],
  'image/heic': ['.heic', '.heif'],
};

function reasonOf({ file, errors }: FileRejection, hasPdf: boolean): { name: string; why: string } {
  const code = errors[0]?.code;
  const why =
    code === 'file-too-large'
      ? 'is larger than 40 MB. Take it again at a smaller size.'
      : `is not a JPEG, PNG, WebP or HEIC picture${hasPdf ? ' or a PDF' : ''}. Choose another file.`;
  return { name: file.name, why };
}

/** Camera, picker, drag and drop, paste. Several files at once; what cannot be taken is named, the others go on. */
export function PhotoDrop({ onFiles, takeText, hasPdf = false }: PhotoDropProps) {
  const camera = useRef<HTMLInputElement>(null);
  const { getRootProps, getInputProps, open, isDragActive } = useDropzone({
    accept: hasPdf ? { ...pictures, 'application/pdf': ['.pdf'] } : pictures,
    maxSize: mostBytes,
    noClick: true,
    noKeyboard: true,
    onDrop: (accepted, rejected) =>
      onFiles(
        accepted,
        rejected.map((one) => reasonOf(one, hasPdf)),
      ),
  });
  useEffect(() => {
    function paste(event: ClipboardEvent) {
      const files = [...(event.clipboardData?.files ?? [])];
      if (files.length === 0) return;
      event.preventDefault();
      onFiles(files, []);
    }
    document.addEventListener('paste', paste);
    return () => document.removeEventListener('paste', paste);
  }, [onFiles]);
  return (
    <div
      {...getRootProps({
        className: `border-[1.5px] border-dashed p-3 ${isDragActive ? 'border-petrol bg-sheet' : 'border-edge'}`,
      })}
    >
      <input {...getInputProps({ 'aria-label': 'Choose files' })} />
      <input
        ref={camera}
        type="file"
        accept="image/*"
        capture="environment"
        hidden
        aria-label={takeText}
        onChange={(event) => {
          onFiles([...(event.target.files ?? [])], []);
          event.target.value = '';
        }}
      />
      <div className="grid gap-2.5 sm:grid-cols-2">
        <Button size="big" isWide className="lg:hidden" onClick={() => camera.current?.click()}>
          {takeText}
        </Button>
        <Button size="big" isWide onClick={open}>
          {hasPdf ? 'Choose photos or a PDF' : 'Choose photos'}
        </Button>
      </div>
      <p className="tag mt-2 hidden lg:block">
        {isDragActive ? 'Let go to add them.' : 'Or drag files here, or paste a picture.'}
      </p>
    </div>
  );
}
