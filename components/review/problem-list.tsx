import { Notice } from '@/components/ui/notice';

/** What keeps a worksheet from being sealed; each line leads to where it is put right. */
export function ProblemList({ problems }: { problems: { field: string; sentence: string; href: string }[] }) {
  if (problems.length === 0) return null;
  return (
    <div className="mb-6">
      <Notice tone="gap" title="Put these right on the worksheet first">
        <ul className="mt-1 grid gap-1">
          {problems.map(({ field, sentence, href }) => (
            <li key={field}>
              {/* The garage is a page of its own, so this is an ordinary link. */}
              <a className="link inline-flex min-h-11 items-center" href={href}>
                {sentence}
              </a>
            </li>
          ))}
        </ul>
      </Notice>
    </div>
  );
}
