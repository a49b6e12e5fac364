import type { Metadata } from 'next';
import Link from 'next/link';
import { FastenerTable, FluidPointTable, SpecPartTable } from '@/components/schedule/spec-tables';
import { LinkButton } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { paths } from '@/lib/paths';
import { readSpecSheet, type SpecSheet } from '@/lib/services/read-spec-sheet';

export const metadata: Metadata = { title: 'Spec sheet' };

function newsOf({ lines, commonPractice }: SpecSheet): string {
  if (lines === 0) return 'The spec sheet is still empty';
  if (commonPractice === 0) return 'Every line of the spec sheet names its source';
  if (commonPractice === lines) return 'Every line is common practice, not yet your manual’s figure';
  return `${commonPractice} of ${lines} lines are common practice, not your manual’s figure`;
}

export default async function SpecSheetPage({ params }: { params: Promise<{ machine: string }> }) {
  const { machine: id } = await params;
  const person = await requirePerson();
  const sheet = await orNotFound(readSpecSheet({ person, machine: id }));
  const { machine, terms, termsSeq } = sheet;
  return (
    <>
      <PageHead
        label={
          <>
            Spec sheet, <UserText>{machine.name}</UserText>
          </>
        }
        title={newsOf(sheet)}
        note={
          termsSeq === null ? undefined : (
            <>
              As sealed in the terms,{' '}
              <Link className="link" href={paths.entry(machine.id, termsSeq)}>
                entry {termsSeq}
              </Link>
              . Figures stand as their source prints them.
            </>
          )
        }
        actions={<LinkButton href={paths.machineSettings(machine.id)}>Identity and people</LinkButton>}
      />
      <div className="grid gap-8">
        <FluidPointTable points={terms?.fluidPoints ?? []} />
        <FastenerTable fasteners={terms?.fasteners ?? []} />
        <SpecPartTable parts={terms?.parts ?? []} />
      </div>
    </>
  );
}
