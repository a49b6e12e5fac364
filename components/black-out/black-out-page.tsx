import Link from 'next/link';
import type { FormAction } from '@/components/account/form-shell';
import { Notice } from '@/components/ui/notice';
import { blackedOutFrom } from '@/lib/domain/blacked-out';
import { roleWords } from '@/lib/domain/record-words';
import type { Attachment } from '@/lib/evidence/format';
import { BlackOutForm } from './black-out-form';

export interface BlackOutPageProps {
  action: FormAction;
  hidden: Record<string, string>;
  /** `entry 7`, `line 3` */
  name: string;
  pictures: Attachment[];
  /** SHA-256 of the shared copy that was chosen. */
  chosen: string | undefined;
  file: (sha256: string, kind: 'thumb' | 'plate') => string;
  hrefOf: (copy: string) => string;
}

/** One picture to draw on; where none is chosen yet, those that there are. */
export function BlackOutPage({ action, hidden, name, pictures, chosen, file, hrefOf }: BlackOutPageProps) {
  const picture = pictures.find(({ copy }) => copy?.sha256 === chosen);
  if (picture?.copy === undefined) return <ChoosePicture {...{ name, pictures, file, hrefOf }} />;
  return (
    <div className="grid max-w-[60rem] gap-6">
      <Meaning what={name.startsWith('entry') ? 'entry' : 'line'} />
      <BlackOutForm
        action={action}
        hidden={{ ...hidden, picture: picture.copy.sha256 }}
        picture={{ src: file(picture.copy.sha256, 'plate'), alt: altOf(picture) }}
      />
    </div>
  );
}

function Meaning({ what }: { what: 'entry' | 'line' }) {
  return (
    <Notice tone="warn" title="It cannot be taken back, only struck">
      <ul className="mt-1 grid list-disc gap-1.5 pl-5">
        <li>
          A new {what} is sealed with a copy in which the boxes are black. What was under them is not in that file.
        </li>
        <li>The picture itself stays as it is, and the record goes on naming it.</li>
        <li>
          Readers get the new copy where you close the pictures, or the pictures of receipts, of a packet or a viewing
          link. Where you leave them open, they get both.
        </li>
        <li>Covers too little? Strike the new {what}: where pictures are closed, readers then get neither.</li>
      </ul>
    </Notice>
  );
}

function ChoosePicture({
  name,
  pictures,
  file,
  hrefOf,
}: Pick<BlackOutPageProps, 'name' | 'pictures' | 'file' | 'hrefOf'>) {
  if (pictures.length === 0)
    return <Notice>There is no picture in {name}. Papers sent as PDF cannot be blacked out here.</Notice>;
  return (
    <section>
      <h2 className="mb-3">Choose the picture</h2>
      <ul className="flex flex-wrap gap-4">
        {pictures.flatMap((picture) =>
          picture.copy === undefined ? (
            []
          ) : (
            <li key={picture.copy.sha256}>
              <Link href={hrefOf(picture.copy.sha256)} className="link grid min-h-11 min-w-11 gap-1.5">
                <img
                  src={file(picture.copy.sha256, 'thumb')}
                  alt=""
                  className="h-40 w-auto max-w-full border border-edge"
                />
                {altOf(picture)}
              </Link>
            </li>
          ),
        )}
      </ul>
    </section>
  );
}

function altOf(picture: Attachment): string {
  const { role, caption } = picture;
  if (blackedOutFrom(picture) !== null) return `${roleWords[role]}: blacked-out copy`;
  return caption === '' ? roleWords[role] : `${roleWords[role]}: ${caption}`;
}
