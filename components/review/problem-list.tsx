import { Notice } from '@/components/ui/notice';
import { UserText } from '@/components/ui/user-text';

/** What keeps a worksheet from being sealed; each line leads to where it is put right. */
export function ProblemList({
  problems,
}: {
  problems: { field: string; where: string; sentence: string; href: string }[];
}) {
  if (problems.length === 0) return null;
  return (
    <div className="mb-6">
      <Notice tone="gap" title="Put these right on the worksheet first">
        <ul>
          {problems.map(({ field, where, sentence, href }) => (
            <li key={field}>
              {/* The garage is a page of its own, so this is an ordinary link. */}
              <a className="link block py-2.5" href={href}>
                <UserText>{where}</UserText>: {sentence}
              </a>
            </li>
          ))}
        </ul>
      </Notice>
    </div>
  );
}
