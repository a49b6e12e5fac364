'use client';

import { useCallback, useRef } from 'react';
import { Button } from '@/components/ui/button';
import type { AttachmentRole } from '@/lib/evidence/format';
import { useDraftInScreen } from './draft-context';
import { photosOf } from './photos-of';
import { RefusedFiles } from './refused-files';
import { useAddPhotos } from './use-add-photos';

/** The camera, without leaving the screen one is working on. What the photo shows is guessed from there. */
export function TakePhoto({ role, isWide }: { role: AttachmentRole; isWide?: boolean }) {
  const { view } = useDraftInScreen();
  const camera = useRef<HTMLInputElement>(null);
  const { add, refused } = useAddPhotos(useCallback(() => role, [role]));
  const count = photosOf(view).length;
  return (
    <div className="min-w-0">
      <input
        ref={camera}
        type="file"
        accept="image/*"
        capture="environment"
        hidden
        aria-label="Take a photo"
        onChange={(event) => {
          void add([...(event.target.files ?? [])]);
          event.target.value = '';
        }}
      />
      <Button size="big" isWide {...(isWide ? {} : { className: 'h-full' })} onClick={() => camera.current?.click()}>
        <span>
          Take a photo
          <span aria-live="polite" className="block text-[0.9375rem] font-normal empty:hidden">
            {count === 0 ? '' : `${count} taken`}
          </span>
        </span>
      </Button>
      <RefusedFiles refused={refused} />
    </div>
  );
}
