import type { Metadata } from 'next';
import { ComparedImport } from '@/components/imports/compared-import';
import { ImportFinding } from '@/components/imports/import-finding';
import { ImportPictures } from '@/components/imports/import-pictures';
import { WitnessMark } from '@/components/mark/witness-mark';
import { bytesWords } from '@/components/entry/words';
import { ConfirmButton } from '@/components/proof/confirm-button';
import { aboutLines } from '@/lib/evidence/about-lines';
import { FindingEntries } from '@/components/reader/verify/finding-entries';
import { outcomeTitle } from '@/components/reader/verify/outcome-words';
import { AnchorButton } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { whatIsShown } from '@/lib/evidence/format';
import { paths } from '@/lib/paths';
import { readImported } from '@/lib/services/read-imported';
import { removeImportAction } from '../actions';

export const dynamic = 'force-dynamic';
export const metadata: Metadata = { title: 'Record from elsewhere' };

export default async function ImportedPage({ params }: { params: Promise<{ import: string }> }) {
  const { import: id } = await params;
  const person = await requirePerson();
  const { row, note, recordText, files } = await orNotFound(readImported({ person, id }));
  const { finding } = note;
  const origin = finding.logs.find(({ subject }) => subject === 'machine')?.origin ?? '';
  return (
    <>
      <PageHead
        label="Record from elsewhere, read-only"
        title={<UserText>{row.name}</UserText>}
        note={`${outcomeTitle(finding, false)}.`}
        mark={<WitnessMark state="sealed" size={88} title={null} />}
        actions={
          <>
            <AnchorButton href={paths.api.importFile(id)}>Download the ZIP ({bytesWords(row.bytes)})</AnchorButton>
            <ConfirmButton
              action={removeImportAction}
              name="import"
              value={id}
              text="Remove"
              busyText="Removing"
              label={`Remove the record of ${row.name}`}
              title="Remove this record from elsewhere?"
            >
              <p>
                The ZIP and the pictures made from it are deleted here, for good. If you have the file somewhere else,
                you can bring it in again.
              </p>
            </ConfirmButton>
          </>
        }
      />
      <Notice tone="warn" title="Read-only: this record is kept elsewhere and is not continued here">
        It is what <bdi>{origin}</bdi> had sealed when the export was made. Nothing can be added to it here, and what
        was sealed or struck there since is not seen here. Before you rely on it, ask for a newer export.
      </Notice>
      <p className="not-printed mt-3 flex flex-wrap gap-x-5">
        <a href="#entries" className="link inline-flex min-h-11 items-center">
          Entries
        </a>
        <a href="#pictures" className="link inline-flex min-h-11 items-center">
          Pictures and papers
        </a>
      </p>
      <ImportFinding note={note}>
        <ComparedImport compared={note.compared} zone={person.timeZone} />
      </ImportFinding>
      <div id="entries">
        <FindingEntries finding={finding} about={aboutLines(recordText)} isTrusted={finding.outcome === 'unchanged'} />
      </div>
      <ImportPictures id={id} finding={finding} files={files} />
      <p className="kept-together mt-8 max-w-[70ch] border-l-4 border-l-petrol pl-4">{whatIsShown}</p>
    </>
  );
}
