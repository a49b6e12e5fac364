'use client';

import { useCallback, useState } from 'react';
import type { AttachmentRole } from '@/lib/evidence/format';
import { useDraftInScreen } from './draft-context';
import { useGarage } from './garage-context';
import { photosOf, type Photo } from './photos-of';

export interface RefusedFile {
  name: string;
  why: string;
}

/** Keeps files on this device and names them in the draft. What cannot be kept is told by name; the others go on. */
export function useAddPhotos(roleOf: (file: File, photos: readonly Photo[]) => AttachmentRole | undefined): {
  add: (files: readonly File[], refused?: readonly RefusedFile[]) => Promise<void>;
  refused: readonly RefusedFile[];
} {
  const { opened } = useDraftInScreen();
  const { garage } = useGarage();
  const [refused, setRefused] = useState<readonly RefusedFile[]>([]);
  const add = useCallback(
    async (files: readonly File[], rejected: readonly RefusedFile[] = []) => {
      if (!garage) return;
      const refusals = [...rejected];
      for (const file of files) {
        if (file.size === 0) {
          refusals.push({ name: file.name, why: 'is empty. Choose another file.' });
          continue;
        }
        try {
          const kept = await garage.addFile(opened, { name: file.name, mediaType: file.type, blob: file });
          const photos = photosOf(opened.view);
          await opened.set({
            [`photos/${kept.id}/position`]: String(photos.length + 1),
            [`photos/${kept.id}/role`]: roleOf(file, photos) ?? null,
          });
        } catch {
          const why = 'could not be kept: this phone has no room for it. Free some and add it again.';
          refusals.push({ name: file.name, why });
        }
      }
      setRefused(refusals);
    },
    [garage, opened, roleOf],
  );
  return { add, refused };
}
