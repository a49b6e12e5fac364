'use client';

import { useCallback } from 'react';
import { Button } from '@/components/ui/button';
import { ProgressBar } from '@/components/ui/progress-bar';
import { UserText } from '@/components/ui/user-text';
import { paths } from '@/lib/paths';
import type { AttachmentRole } from '@/lib/evidence/format';
import { useDraftInScreen } from './draft-context';
import { DraftChoice, DraftText } from './draft-fields';
import { useGarage } from './garage-context';
import { roleWords } from './photo-roles';
import type { Photo } from './photos-of';

const sizeWords = (bytes: number): string =>
  bytes < 100_000 ? `${Math.ceil(bytes / 1000)} kB` : `${(bytes / 1_000_000).toFixed(1)} MB`;

export function PhotoRow({ photo, roles }: { photo: Photo; roles: readonly AttachmentRole[] }) {
  const { opened } = useDraftInScreen();
  const { garage, view } = useGarage();
  const { file } = photo;
  const share = view.progress[photo.id];
  async function remove() {
    await opened.set({ [`photos/${photo.id}/removed`]: 'yes' });
    if (file) await garage?.removeFile(opened, photo.id);
  }
  return (
    <li className="grid gap-3 border-b border-line py-4 sm:grid-cols-[7rem_minmax(0,1fr)]">
      <PhotoPicture photo={photo} />
      <div className="min-w-0 space-y-3">
        <p className="flex flex-wrap justify-between gap-x-4">
          <span className="min-w-0 font-medium">
            <UserText>{photo.name}</UserText>
          </span>
          <span className="tag">{whereWords(photo, share)}</span>
        </p>
        {share === undefined ? null : (
          <ProgressBar label={`Sending ${photo.name}`} value={share} text={`${Math.round(share * 100)} %`} />
        )}
        {file?.state === 'refused' ? (
          <p role="alert" className="tone-gap">
            {file.refusal}
          </p>
        ) : (
          <>
            <DraftChoice
              path={`photos/${photo.id}/role`}
              label="What it shows"
              options={roles.map((role) => ({ value: role, label: roleWords[role] }))}
            />
            <DraftText path={`photos/${photo.id}/caption`} label="Caption" isOptional />
          </>
        )}
        <div className="flex flex-wrap gap-2.5">
          {file?.state === 'refused' && file.blob ? (
            <Button size="big" onClick={() => void garage?.retryFile(opened, photo.id)}>
              Try again
            </Button>
          ) : null}
          <Button look="quiet" size="big" onClick={() => void remove()} aria-label={`Remove ${photo.name}`}>
            Remove
          </Button>
        </div>
      </div>
    </li>
  );
}

function whereWords({ file, upload }: Photo, share: number | undefined): string {
  if (file?.state === 'refused') return 'Refused';
  if (upload ?? file?.answer) return `On the server, ${sizeWords((upload ?? file?.answer)?.bytes ?? 0)}`;
  const size = sizeWords(file?.bytes ?? 0);
  return share === undefined ? `Kept on this phone, ${size}` : `On its way, ${size}`;
}

function PhotoPicture({ photo }: { photo: Photo }) {
  const { view } = useDraftInScreen();
  const { file } = photo;
  // A browser that lost a picture's bytes gives back something that is no blob.
  const blob = file?.blob instanceof Blob && photo.mediaType.startsWith('image/') ? file.blob : undefined;
  const show = useCallback(
    (image: HTMLImageElement | null) => {
      if (!blob || !image) return;
      const url = URL.createObjectURL(blob);
      image.src = url;
      return () => URL.revokeObjectURL(url);
    },
    [blob],
  );
  const answer = photo.upload ?? file?.answer;
  const thumb = answer?.thumbSha256 ? paths.api.file(answer.sha256, 'thumb', view.draft.subject) : undefined;
  if (!blob && !thumb) {
    return (
      <p className="tag flex min-h-20 items-center justify-center border border-line bg-sheet p-2">
        {photo.mediaType === 'application/pdf' ? 'PDF' : 'No preview'}
      </p>
    );
  }
  const look = 'max-h-40 w-full border border-line bg-sheet object-contain sm:max-h-28';
  return blob ? <img key="here" ref={show} alt="" className={look} /> : <img src={thumb} alt="" className={look} />;
}
