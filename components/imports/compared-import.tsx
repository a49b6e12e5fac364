import Link from 'next/link';
import { ComparisonPart } from '@/components/reader/verify/comparison-part';
import { UserText } from '@/components/ui/user-text';
import { formatInstant } from '@/lib/domain/instants';
import { paths } from '@/lib/paths';
import type { ImportNote } from '@/lib/services/staged-import';

/** How it stands to what the same person keeps of the same record: continued, or contradicted. */
export function ComparedImport({ compared, zone }: { compared: ImportNote['compared']; zone: string }) {
  if (compared === null) return null;
  const { id, name, importedAt, comparison } = compared;
  return (
    <>
      <p className="mt-6 max-w-[70ch]">
        You keep an export of this same record already:{' '}
        <Link href={paths.import(id)} className="link">
          <UserText>{name}</UserText>, brought in {formatInstant(importedAt, zone)}
        </Link>
        . This file was compared with it.
        {comparison.result === 'consistent' ? ' It continues that one.' : ''}
      </p>
      <ComparisonPart comparison={comparison} />
    </>
  );
}
