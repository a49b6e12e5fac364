'use client';

import { useCallback, useMemo, useState } from 'react';
import { fieldTree, itemsOf } from '@/lib/domain/field-changes';
import type { AttachmentRole } from '@/lib/evidence/format';
import { Notice } from '@/components/ui/notice';
import { UserText } from '@/components/ui/user-text';
import { useDraftInScreen } from './draft-context';
import { useGarage } from './garage-context';
import type { DraftView } from './open-draft';
import { PhotoDrop } from './photo-drop';
import { PhotoRow, type Photo } from './photo-row';

/** Photos the fields name, those of this device first known by their file, others by their upload. */
export function photosOf({ fields, files, uploads }: DraftView): Photo[] {
  const named = itemsOf(fieldTree(fields), 'photos').map(({ id }) => id);
  const ids = [...new Set([...named, ...files.filter(({ state }) => state === 'refused').map(({ id }) => id)])];
  return ids.map((id) => {
    const file = files.find((one) => one.id === id);
    const upload = uploads.find((one) => one.id === id);
    const known = file ?? upload;
    return {
      id,
      name: known?.name ?? 'Photo from another device',
      mediaType: known?.mediaType ?? '',
      ...(file ? { file } : {}),
      ...(upload ? { upload } : {}),
    };
  });
}

export interface PhotosProps {
  roles: readonly AttachmentRole[];
  takeText: string;
  hasPdf?: boolean;
  /** The role the next photo most likely has; it can be changed by one tap. */
  nextRole: (photos: readonly Photo[]) => AttachmentRole | undefined;
}

export function Photos({ roles, takeText, hasPdf, nextRole }: PhotosProps) {
  const { opened, view } = useDraftInScreen();
  const { garage } = useGarage();
  const [refused, setRefused] = useState<{ name: string; why: string }[]>([]);
  const photos = useMemo(() => photosOf(view), [view]);
  const add = useCallback(
    async (files: File[], rejected: { name: string; why: string }[]) => {
      const refusals = [...rejected];
      for (const file of files) {
        try {
          const kept = await garage?.addFile(opened, { name: file.name, mediaType: file.type, blob: file });
          if (!kept) continue;
          const now = photosOf(opened.view);
          const role = file.type === 'application/pdf' && hasPdf ? 'receipt-page' : nextRole(now);
          await opened.set({
            [`photos/${kept.id}/position`]: String(now.length + 1),
            [`photos/${kept.id}/role`]: role ?? null,
          });
        } catch {
          refusals.push({
            name: file.name,
            why: 'could not be kept: this phone has no room for it. Free some and add it again.',
          });
        }
      }
      setRefused(refusals);
    },
    [garage, opened, nextRole, hasPdf],
  );
  return (
    <section aria-label="Photos">
      <PhotoDrop
        takeText={takeText}
        hasPdf={hasPdf ?? false}
        onFiles={(files, rejected) => void add(files, rejected)}
      />
      {refused.length > 0 ? (
        <div className="mt-3">
          <Notice tone="gap" title="Not added" isLive>
            <ul>
              {refused.map(({ name, why }) => (
                <li key={name}>
                  <UserText>{name}</UserText> {why}
                </li>
              ))}
            </ul>
          </Notice>
        </div>
      ) : null}
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
