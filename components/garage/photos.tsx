'use client';

import { useCallback, useMemo } from 'react';
import type { AttachmentRole } from '@/lib/evidence/format';
import { useDraftInScreen } from './draft-context';
import { PhotoDrop } from './photo-drop';
import { PhotoRow } from './photo-row';
import { photosOf, type Photo } from './photos-of';
import { RefusedFiles } from './refused-files';
import { useAddPhotos } from './use-add-photos';

export interface PhotosProps {
  roles: readonly AttachmentRole[];
  takeText: string;
  hasPdf?: boolean;
  /** What a PDF most likely is. */
  pdfRole?: AttachmentRole;
  /** The role the next photo most likely has; it can be changed by one tap. */
  nextRole: (photos: readonly Photo[]) => AttachmentRole | undefined;
}

export function Photos({ roles, takeText, hasPdf = false, pdfRole = 'receipt-page', nextRole }: PhotosProps) {
  const { view } = useDraftInScreen();
  const photos = useMemo(() => photosOf(view), [view]);
  const roleOf = useCallback(
    (file: File, others: readonly Photo[]) => (file.type === 'application/pdf' && hasPdf ? pdfRole : nextRole(others)),
    [hasPdf, pdfRole, nextRole],
  );
  const { add, refused } = useAddPhotos(roleOf);
  return (
    <section aria-label="Photos">
      <PhotoDrop takeText={takeText} hasPdf={hasPdf} onFiles={(files, rejected) => void add(files, rejected)} />
      <RefusedFiles refused={refused} />
      {photos.length > 0 ? (
        <ul className="mt-2 border-t border-line">
          {photos.map((photo) => (
            <PhotoRow key={photo.id} photo={photo} roles={roles} />
          ))}
        </ul>
      ) : null}
    </section>
  );
}
