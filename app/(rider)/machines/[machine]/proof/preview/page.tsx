import type { Metadata } from 'next';
import Link from 'next/link';
import { notFound } from 'next/navigation';
import { z } from 'zod';
import { pageNumber } from '@/components/account/paging';
import { EntryView } from '@/components/entry/entry-view';
import { readerFacts, readerLinks } from '@/components/reader/reader-links';
import { ReaderRecord } from '@/components/reader/reader-record';
import { Notice } from '@/components/ui/notice';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { scopeWords } from '@/lib/domain/scope-words';
import { paths } from '@/lib/paths';
import { previewViewing } from '@/lib/services/read-viewing';
import { refuseBackwards, scopeFields, scopeOf } from '@/lib/services/scope-input';

export const metadata: Metadata = { title: 'What the reader sees', referrer: 'no-referrer' };

const asked = z.object(scopeFields).superRefine(refuseBackwards);
type Props = {
  params: Promise<{ machine: string }>;
  searchParams: Promise<Record<string, string | string[] | undefined>>;
};

/** What a reader would see with a choice, drawn as they would see it; nothing is shared by looking. */
export default async function PreviewPage({ params, searchParams }: Props) {
  const [{ machine: machineId }, { entry: seq, page, ...query }] = await Promise.all([params, searchParams]);
  const person = await requirePerson();
  const choice = asked.safeParse(query);
  const scope = choice.success ? scopeOf(choice.data) : null;
  const shown = await orNotFound(previewViewing({ person, machineId, scope: scope ?? { closed: [] } }));
  if (scope === null) return <Notice tone="gap">{choice.error?.issues[0]?.message} Go back and choose again.</Notice>;
  const { record } = shown;
  const path = `${paths.proofPreview(machineId)}?${new URLSearchParams(choice.data).toString()}`;
  const file = (sha256: string, kind: 'thumb' | 'plate' | 'copy') => paths.api.file(sha256, kind, machineId);
  const links = { ...readerLinks({ record, file }), entry: (one: number) => `${path}&entry=${one}` };
  const chosen = record.entries.find((one) => String(one.seq) === seq);
  if (seq !== undefined && chosen === undefined) notFound();
  return (
    <>
      <div className="mb-5">
        <Notice title="This is what a reader would see. Nothing is shared yet.">
          {scopeWords(scope)}.{' '}
          <Link href={chosen === undefined ? paths.proof(machineId) : path} className="link">
            {chosen === undefined ? 'Back to proof' : 'Back to the record as the reader sees it'}
          </Link>
        </Notice>
      </div>
      {chosen === undefined ? (
        <ReaderRecord shown={shown} links={links} page={pageNumber(page)} path={path} />
      ) : (
        <EntryView entry={chosen} facts={readerFacts(shown)} links={links} />
      )}
    </>
  );
}
