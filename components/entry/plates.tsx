import { Hash } from '@/components/ui/hash';
import { UserText } from '@/components/ui/user-text';
import type { Attachment } from '@/lib/evidence/format';
import { plateOrder, type EntryLinks } from './entry-facts';
import { roleWords } from '@/lib/domain/record-words';
import { bytesWords, plateKind, removedWords, takenWords } from './words';

export interface PlatesProps {
  attachments: Attachment[];
  zone: string;
  file: EntryLinks['file'];
  label: string;
}

/** Pictures and papers, whole, each with what it shows, when it was taken by its own word, and its hashes. */
export function Plates({ attachments, zone, file, label }: PlatesProps) {
  const inOrder = [...attachments].sort((a, b) => plateOrder.indexOf(a.role) - plateOrder.indexOf(b.role));
  return (
    <ul aria-label={label} className="flex flex-wrap items-start gap-x-5 gap-y-6">
      {inOrder.map((attachment) => (
        <li key={`${attachment.role} ${attachment.sha256}`} className="kept-together max-w-full">
          <Plate {...{ attachment, zone, file }} />
        </li>
      ))}
    </ul>
  );
}

function Plate({ attachment, zone, file }: Omit<PlatesProps, 'attachments' | 'label'> & { attachment: Attachment }) {
  const { sha256, role, caption, bytes, copy } = attachment;
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
          <p className="label mt-1">Original, {bytesWords(bytes)}</p>
          <Hash value={sha256} what="SHA-256 of the original" />
          {copy === undefined ? null : (
            <>
              <p className="label mt-2">Shared copy, {bytesWords(copy.bytes)}</p>
              <Hash value={copy.sha256} what="SHA-256 of the shared copy" />
              <p className="tag">
                {copy.removed.length === 0 ? 'Nothing was taken out.' : `Taken out: ${removedWords(copy.removed)}.`}
              </p>
            </>
          )}
          {original === undefined ? null : (
            <a className="link inline-flex min-h-11 items-center" href={original} download>
              Download the original
            </a>
          )}
        </details>
      </figcaption>
    </figure>
  );
}
