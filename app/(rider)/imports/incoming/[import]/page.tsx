import type { Metadata } from 'next';
import Link from 'next/link';
import { ComparedImport } from '@/components/imports/compared-import';
import { DecideImport } from '@/components/imports/decide-import';
import { ImportFinding } from '@/components/imports/import-finding';
import { WitnessMark } from '@/components/mark/witness-mark';
import { outcomeSentence, outcomeTitle } from '@/components/reader/verify/outcome-words';
import { Notice } from '@/components/ui/notice';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { formatInstant } from '@/lib/domain/instants';
import { paths } from '@/lib/paths';
import { readStaged } from '@/lib/services/read-imported';
import { discardImportAction, keepImportAction, recheckImportAction } from '../../actions';

export const dynamic = 'force-dynamic';
export const metadata: Metadata = { title: 'What was found' };

export default async function StagedImportPage({ params }: { params: Promise<{ import: string }> }) {
  const { import: id } = await params;
  const person = await requirePerson();
  const { note, name, mayBeKept, sameAs } = await orNotFound(readStaged({ person, id }));
  const { finding, fileName } = note;
  return (
    <div data-outcome={finding.outcome}>
      <PageHead
        label={<UserText>{finding.outcome === 'unreadable' ? fileName : `${name}, ${fileName}`}</UserText>}
        title={outcomeTitle(finding, false)}
        note={outcomeSentence(finding)}
        mark={
          finding.outcome === 'unreadable' ? undefined : (
            <WitnessMark state={mayBeKept ? 'sealed' : 'altered'} size={88} title={null} />
          )
        }
      />
      {sameAs === null ? null : (
        <div className="mb-5">
          <Notice title="You keep this very file already">
            Brought in {formatInstant(sameAs.importedAt, person.timeZone)}:{' '}
            <Link href={paths.import(sameAs.id)} className="link">
              <UserText>{sameAs.name}</UserText>
            </Link>
            .
          </Notice>
        </div>
      )}
      {mayBeKept ? null : (
        <div className="mb-5">
          <Notice tone="gap" title="It is not kept here">
            The file was removed from this server again; only what was found is shown. Ask whoever made it for the
            export as it was downloaded, and bring in that one.
          </Notice>
        </div>
      )}
      <DecideImport
        id={id}
        keep={keepImportAction}
        discard={discardImportAction}
        recheck={recheckImportAction}
        canKeep={mayBeKept && sameAs === null}
        canRecheck={mayBeKept}
      />
      <ImportFinding note={note}>
        <ComparedImport compared={sameAs === null ? note.compared : null} zone={person.timeZone} />
      </ImportFinding>
    </div>
  );
}
