import type { Metadata } from 'next';
import { DueRules } from '@/components/bench/due-rules';
import { OpenWorksheets } from '@/components/bench/open-worksheets';
import { WaitingList } from '@/components/bench/waiting-list';
import { WarrantyLines } from '@/components/bench/warranty-lines';
import { AnchorButton } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { paths } from '@/lib/paths';
import { readBench } from '@/lib/services/read-bench';

export const metadata: Metadata = { title: 'Bench' };

export default async function BenchPage({ params }: { params: Promise<{ machine: string }> }) {
  const { machine: id } = await params;
  const person = await requirePerson();
  const { machine, headline, note, rules, due, warranty, worksheets, waiting } = await orNotFound(
    readBench({ person, machine: id }),
  );
  return (
    <>
      <PageHead
        label={
          <>
            <UserText>{machine.name}</UserText>, {note.charAt(0).toLowerCase() + note.slice(1)}
          </>
        }
        title={<UserText>{headline}</UserText>}
        actions={
          <>
            <AnchorButton href={paths.newReceipt}>Photograph a receipt</AnchorButton>
            <AnchorButton href={paths.newWorksheet(machine.id)} look="main">
              Start a worksheet
            </AnchorButton>
          </>
        }
      />
      <OpenWorksheets worksheets={worksheets} zone={machine.timeZone} />
      <DueRules machine={machine.id} rules={rules} due={due} />
      <WaitingList machine={machine.id} waiting={waiting} />
      <WarrantyLines warranty={warranty} />
    </>
  );
}
