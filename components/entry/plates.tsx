import { Hash } from '@/components/ui/hash';
import { UserText } from '@/components/ui/user-text';
import type { Attachment } from '@/lib/evidence/format';
import { plateOrder, type EntryLinks } from './entry-facts';
import Link from 'next/link';
import { blackedOutFrom } from '@/lib/domain/blacked-out';
import { roleWords } from '@/lib/domain/record-words';
import { bytesWords, plateKind, removedWords, takenWords } from './words';

export interface PlatesProps {
  attachments: Attachment[];
  zone: string;
  file: EntryLinks['file'];
  label: string;
  /** Where a part of a picture can be blacked out, by the SHA-256 of its shared copy; for owners. */
  blackOut?: ((copy: string) => string | undefined) | undefined;
}

/** Pictures and papers, whole, each with what it shows, when it was taken by its own word, and its hashes. */
export function Plates({ attachments, zone, file, label, blackOut }: PlatesProps) {
  const inOrder = [...attachments].sort((a, b) => plateOrder.indexOf(a.role) - plateOrder.indexOf(b.role));
  return (
    <ul aria-label={label} className="flex flex-wrap items-start gap-x-5 gap-y-6">
      {inOrder.map((attachment, index) => (
        <li key={`${attachment.sha256} ${index}`} className="kept-together max-w-full">
          <Plate {...{ attachment, zone, file, blackOut }} />
        </li>
      ))}
    </ul>
  );
}

type PlateProps = Omit<PlatesProps, 'attachments' | 'label'> & { attachment: Attachment };

function Plate({ attachment, zone, file, blackOut }: PlateProps) {
  const { sha256, role, bytes, copy } = attachment;
  const from = blackedOutFrom(attachment);
  const caption = from === null ? attachment.caption : 'blacked-out copy';
  const blackOutHref = copy === undefined ? undefined : blackOut?.(copy.sha256);
  const plate = file(sha256, 'plate');
  const original = file(sha256, 'original');
  const alt = caption === '' ? roleWords[role] : `${roleWords[role]}: ${caption}`;
  return (
    <figure className="max-w-full">
      {plate === undefined || plateKind(attachment) === 'pdf' ? (
        <span className="figure flex h-64 w-48 max-w-full items-end justify-center border border-edge bg-sheet pb-4 text-3xl">
          {plateKind(attachment) === 'pdf' ? 'PDF' : 'Not shown'}
        </span>
      ) : (
        <a href={plate} className="block w-fit max-w-full">
          <img
            src={plate}
            alt={alt}
            loading="lazy"
            decoding="async"
            className="h-64 w-auto max-w-full border border-edge bg-steel object-contain"
          />
        </a>
      )}
      {/* The picture sets the width; its words wrap under it. */}
      <figcaption className="w-0 min-w-[max(100%,13rem)] pt-1.5">
        <span className="font-medium">{roleWords[role]}</span>
        {caption === '' ? null : (
          <>
            : <UserText>{caption}</UserText>
          </>
        )}
        <span className="tag block">{takenWords(attachment, zone)}</span>
        <details className="mt-1">
          <summary className="link inline-flex min-h-7 items-center text-[0.9375rem]">Hashes and original</summary>
          <p className="label mt-1">
            {from === null ? 'Original' : 'Blacked-out copy'}, {bytesWords(bytes)}
          </p>
          <Hash value={sha256} what={`SHA-256 of the ${from === null ? 'original' : 'blacked-out copy'}`} />
          {from === null ? null : (
            <>
              <p className="label mt-2">Made here from the shared copy</p>
              <Hash value={from} what="SHA-256 of the shared copy it was made from" />
            </>
          )}
          {copy === undefined || from !== null ? null : (
            <>
              <p className="label mt-2">Shared copy, {bytesWords(copy.bytes)}</p>
              <Hash value={copy.sha256} what="SHA-256 of the shared copy" />
              <p className="tag">
                {copy.removed.length === 0 ? 'Nothing was taken out.' : `Taken out: ${removedWords(copy.removed)}.`}
              </p>
            </>
          )}
          {original === undefined || from !== null ? null : (
            <a className="link inline-flex min-h-11 items-center" href={original} download>
              Download the original
            </a>
          )}
        </details>
        {blackOutHref === undefined ? null : (
          <Link className="link not-printed inline-flex min-h-11 items-center" href={blackOutHref}>
            Black out part of this picture
          </Link>
        )}
      </figcaption>
    </figure>
  );
}
