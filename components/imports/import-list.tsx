import Link from 'next/link';
import { bytesWords, counted } from '@/components/entry/words';
import { instantWords } from '@/components/reader/verify/finding-words';
import { Sheet } from '@/components/ui/box';
import { UserText } from '@/components/ui/user-text';
import { formatInstant } from '@/lib/domain/instants';
import { paths } from '@/lib/paths';
import type { ListedImport } from '@/lib/services/read-imported';

/** Records from elsewhere, newest first. */
export function ImportList({ imports, zone }: { imports: ListedImport[]; zone: string }) {
  if (imports.length === 0) return <p className="tag">No record from elsewhere is kept here.</p>;
  return (
    <Sheet>
      <ul role="list" className="divide-y divide-hair">
        {imports.map(({ id, name, number, madeAt, size, bytes, importedAt }) => (
          <li key={id} className="px-4 py-3">
            <p className="font-semibold">
              <Link href={paths.import(id)} className="link inline-flex min-h-11 items-center">
                <UserText>{name}</UserText>
              </Link>
            </p>
            <p className="tag">
              <UserText>{number}</UserText>, made {instantWords(madeAt)}; {counted(size, 'entry', 'entries')},{' '}
              {bytesWords(bytes)}. Brought in {formatInstant(importedAt, zone)}.
            </p>
          </li>
        ))}
      </ul>
    </Sheet>
  );
}
