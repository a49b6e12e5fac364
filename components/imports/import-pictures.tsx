import { UserText } from '@/components/ui/user-text';
import { entryWords } from '@/components/reader/verify/finding-words';
import { roleWords } from '@/lib/domain/record-words';
import type { EntryFinding, Finding } from '@/lib/evidence/finding';
import type { Attachment, AttachmentRole } from '@/lib/evidence/format';
import { paths } from '@/lib/paths';
import type { ImportedRecord } from '@/lib/services/read-imported';

export interface ImportPicturesProps {
  id: string;
  finding: Finding;
  files: ImportedRecord['files'];
}

/** The shared copy where there is one: it is what the record shows. The original stays in the ZIP. */
function shownOf({ sha256, copy }: Attachment, files: ImportedRecord['files']): string | null {
  for (const hash of [copy?.sha256, sha256]) {
    const file = hash === undefined ? undefined : files.get(hash);
    if (file !== undefined && file.mediaType.startsWith('image/')) return file.sha256;
  }
  return null;
}

// The check looked at hashes and lengths; roles and captions are whatever somebody wrote.
const roleOf = ({ role }: Attachment) => (Object.hasOwn(roleWords, role) ? roleWords[role as AttachmentRole] : 'File');
const captionOf = ({ caption }: Attachment) => (typeof caption === 'string' ? caption.slice(0, 500) : '');

function attachmentsOf({ openedParts }: EntryFinding): Attachment[] {
  return (openedParts.find(({ name }) => name === 'attachments')?.value ?? []) as Attachment[];
}

/** Pictures and papers entry by entry, made anew from the ZIP. */
export function ImportPictures({ id, finding, files }: ImportPicturesProps) {
  const machine = finding.logs.find(({ subject }) => subject === 'machine')?.id;
  const entries = finding.entries.filter((entry) => attachmentsOf(entry).length > 0);
  if (entries.length === 0) return null;
  return (
    <section id="pictures" className="mt-8">
      <h2 className="mb-3">Pictures and papers</h2>
      <ol role="list" className="grid gap-6">
        {entries.map((entry) => (
          <li key={`${entry.log} ${entry.seq}`} className="kept-together">
            <h3 className="mb-2">
              {entry.log === machine ? 'Entry' : 'Shelf, line'} {entry.seq}:{' '}
              <UserText>{entryWords(entry).title}</UserText>
            </h3>
            <ul role="list" className="flex flex-wrap gap-3 sm:gap-4">
              {attachmentsOf(entry).map((attachment, index) => (
                <li key={index} className="w-[6.75rem] sm:w-40">
                  <Picture id={id} attachment={attachment} shown={shownOf(attachment, files)} isThere={files.has(attachment.sha256)} />
                </li>
              ))}
            </ul>
          </li>
        ))}
      </ol>
    </section>
  );
} // prettier-ignore

interface PictureProps {
  id: string;
  attachment: Attachment;
  shown: string | null;
  isThere: boolean;
}

function Picture({ id, attachment, shown, isThere }: PictureProps) {
  const [role, caption] = [roleOf(attachment), captionOf(attachment)];
  return (
    <figure>
      {shown === null ? (
        <span className="tag flex size-[6.75rem] sm:size-40 items-center justify-center border border-edge bg-sheet p-3 text-center">
          {isThere ? 'A paper: it is in the ZIP' : 'Not in the export'}
        </span>
      ) : (
        <a href={paths.api.importPicture(id, shown, 'plate')} className="block">
          <img
            src={paths.api.importPicture(id, shown, 'thumb')}
            alt={caption === '' ? role : `${role}: ${caption}`}
            loading="lazy"
            decoding="async"
            className="size-[6.75rem] sm:size-40 border border-edge bg-steel object-cover"
          />
        </a>
      )}
      <figcaption className="pt-1.5 text-[0.9375rem]">
        <span className="font-medium">{role}</span>
        {caption === '' ? null : (
          <>
            : <UserText>{caption}</UserText>
          </>
        )}
      </figcaption>
    </figure>
  );
}
