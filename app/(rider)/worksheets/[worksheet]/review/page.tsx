import type { Metadata } from 'next';
import { redirect } from 'next/navigation';
import { EntryPreview } from '@/components/review/entry-preview';
import { ProblemList } from '@/components/review/problem-list';
import { ReaderChecks } from '@/components/review/reader-checks';
import { SealForm } from '@/components/review/seal-form';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { paths } from '@/lib/paths';
import { usablePasskeys } from '@/lib/services/list-passkeys';
import { reviewWorksheet } from '@/lib/services/review-worksheet';
import { seal } from './actions';

export const metadata: Metadata = { title: 'Review before sealing' };

function newsOf(problems: number, gaps: number): string {
  if (problems === 1) return 'One thing keeps it from being sealed';
  if (problems > 1) return `${problems} things keep it from being sealed`;
  if (gaps === 1) return 'Ready to seal, with one gap';
  return gaps > 1 ? `Ready to seal, with ${gaps} gaps` : 'Ready to seal, without a gap';
}

export default async function ReviewPage({ params }: { params: Promise<{ worksheet: string }> }) {
  const { worksheet } = await params;
  const person = await requirePerson();
  const review = await orNotFound(reviewWorksheet({ person, draftId: worksheet }));
  const { machine, composed, problems, nextSeq } = review;
  if (review.sealedAs !== null || composed === null) redirect(paths.entry(machine.id, review.sealedAs ?? 0));
  const hasKey = (await usablePasskeys({ personId: person.id })).length > 0;
  const gaps = composed.body?.checks.filter(({ result }) => result === 'gap').length ?? 0;
  const canSeal = composed.body !== undefined && problems.length === 0;
  return (
    <>
      <PageHead
        label={<UserText>{machine.name}</UserText>}
        title={newsOf(problems.length, gaps)}
        note={
          canSeal
            ? `This is entry ${nextSeq} as it will read for ever. Once sealed it can be added to or struck, never edited.`
            : 'Once this is put right, the entry is shown here as it will read for ever.'
        }
        actions={
          <a className="link" href={paths.worksheet(worksheet)}>
            Back to the worksheet
          </a>
        }
      />
      <ProblemList problems={problems} />
      {review.body === null ? null : (
        <>
          <EntryPreview
            body={review.body}
            notes={composed.notes?.text}
            attachments={composed.attachments}
            machine={machine.id}
          />
          <ReaderChecks checks={review.body.checks} href={`${paths.worksheet(worksheet)}/summary`} />
        </>
      )}
      {review.mayISeal ? (
        <SealForm
          action={seal}
          worksheet={worksheet}
          reviewed={composed.fingerprint}
          isReady={canSeal}
          seq={nextSeq}
          hasKey={hasKey}
        />
      ) : (
        <p className="tag mt-6">Only an owner of the machine can seal. Ask them to open this page.</p>
      )}
    </>
  );
}
