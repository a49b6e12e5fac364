import Link from 'next/link';
import { Sheet } from '@/components/ui/box';
import { UserText } from '@/components/ui/user-text';

export interface RecordGapsProps {
  gaps: { seq: number | null; isWhole?: true; sentence: string }[];
  hrefOf: (seq: number) => string;
}

/** Stated before anything else: what a reader would have to find out for themselves. */
export function RecordGaps({ gaps, hrefOf }: RecordGapsProps) {
  return (
    <section aria-labelledby="gaps" className="mt-6">
      <h2 id="gaps" className="mb-3">
        {gaps.length === 0 ? 'No gap' : gaps.length === 1 ? 'One gap' : `${gaps.length} gaps`}
      </h2>
      {gaps.length === 0 ? (
        <p className="max-w-[70ch]">
          Every reader’s check of every service that stands is met, and every interval of the schedule was kept.
        </p>
      ) : (
        <Sheet>
          <ol role="list" className="divide-y divide-hair">
            {gaps.map(({ seq, isWhole, sentence }, index) => (
              <li
                key={index}
                className="relative grid grid-cols-[4.5rem_minmax(0,1fr)] hover:bg-paper sm:grid-cols-[6rem_minmax(0,1fr)]"
              >
                <span className="label border-r border-margin px-3 py-2.5 text-right">
                  {seq === null ? (isWhole === true ? 'Record' : 'Now') : `Entry ${seq}`}
                </span>
                <span className="min-w-0 px-3 py-2.5">
                  {seq === null ? (
                    <UserText>{sentence}</UserText>
                  ) : (
                    <Link
                      href={hrefOf(seq)}
                      className="underline-offset-4 decoration-1 after:absolute after:inset-0 hover:underline"
                    >
                      <UserText>{sentence}</UserText>
                    </Link>
                  )}
                </span>
              </li>
            ))}
          </ol>
        </Sheet>
      )}
    </section>
  );
}
