import type { Metadata } from 'next';
import Link from 'next/link';
import { ScheduleItemBoxes } from '@/components/schedule/schedule-item';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { paths } from '@/lib/paths';
import { readSchedule, type ScheduleLine } from '@/lib/services/read-schedule';

export const metadata: Metadata = { title: 'Schedule' };

function newsOf(lines: ScheduleLine[]): string {
  const [first, ...others] = lines.filter(({ isDue }) => isDue);
  if (lines.length === 0) return 'No schedule is entered yet';
  if (first === undefined) return 'Nothing on the schedule is due today';
  if (others.length === 0) return `One item is due: ${first.title}`;
  return `${others.length + 1} items are due, ${first.title} first`;
}

export default async function SchedulePage({ params }: { params: Promise<{ machine: string }> }) {
  const { machine: id } = await params;
  const person = await requirePerson();
  const { machine, termsSeq, lines } = await orNotFound(readSchedule({ person, machine: id }));
  return (
    <>
      <PageHead
        label={
          <>
            Schedule, <UserText>{machine.name}</UserText>
          </>
        }
        title={<UserText>{newsOf(lines)}</UserText>}
        note={
          termsSeq === null ? undefined : (
            <>
              As sealed in the terms,{' '}
              <Link className="link" href={paths.entry(machine.id, termsSeq)}>
                entry {termsSeq}
              </Link>
              . Whichever limit comes first counts.
            </>
          )
        }
      />
      <div className="grid gap-7">
        {lines.map((line) => (
          <ScheduleItemBoxes key={line.item} line={line} machine={machine.id} />
        ))}
      </div>
    </>
  );
}
