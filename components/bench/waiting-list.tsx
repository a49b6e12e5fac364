import Link from 'next/link';
import { WitnessMark } from '@/components/mark/witness-mark';
import { Sheet } from '@/components/ui/box';
import { UserText } from '@/components/ui/user-text';
import { paths } from '@/lib/paths';
import type { Waiting } from '@/lib/services/bench-waiting';

export interface WaitingListProps {
  machine: string;
  waiting: Waiting[];
}

const words: Record<Waiting['kind'], string> = { invitation: 'Asked', 'time-stamp': 'Nothing to do', gap: 'Gap' };

/** What waits for somebody: shops that were asked, time stamps to come, gaps that can still be mended. */
export function WaitingList({ machine, waiting }: WaitingListProps) {
  if (waiting.length === 0) return null;
  return (
    <section aria-labelledby="waiting" className="mt-8">
      <h2 id="waiting" className="mb-3">
        Waiting
      </h2>
      <Sheet>
        <ul className="divide-y divide-hair">
          {waiting.map(({ kind, seq, title, note }) => (
            <li
              key={`${kind} ${seq} ${title}`}
              className="relative flex items-center gap-x-4 px-4 py-3 hover:bg-paper has-focus-visible:bg-paper"
            >
              {kind === 'time-stamp' ? <WitnessMark state="waiting" title={null} size={48} /> : null}
              <div className="min-w-0 flex-auto">
                <p className="font-semibold">
                  <Link
                    href={paths.entry(machine, seq)}
                    className="underline-offset-4 decoration-1 after:absolute after:inset-0 hover:underline"
                  >
                    <UserText>{title}</UserText>
                  </Link>
                </p>
                <p className="tag">{note}</p>
              </div>
              <span className={kind === 'gap' ? 'tone-gap shrink-0 text-[0.9375rem]' : 'tag shrink-0'}>
                {words[kind]}
              </span>
            </li>
          ))}
        </ul>
      </Sheet>
    </section>
  );
}
