import { UserText } from '@/components/ui/user-text';
import { alterationCodes } from '@/lib/evidence/codes';
import type { Finding } from '@/lib/evidence/finding';
import { cut } from './cut';
import { TechnicalLine } from './technical-line';

/** What is not as it was sealed, each with where, in words, and a technical line beneath. */
export function AlterationList({ finding: { alterations, logs } }: { finding: Finding }) {
  if (alterations.length === 0) return null;
  const isShelf = (log: string | undefined) => logs.find(({ id }) => id === log)?.subject === 'shelf';
  return (
    <section className="mt-6">
      <h3 className="mb-2">
        {alterations.length === 1 ? 'What is not as sealed' : `${alterations.length} things are not as sealed`}
      </h3>
      <ol className="max-w-[80ch] divide-y divide-line border-y border-line">
        {alterations.map(({ code, sentence, technical, log, seq, part }, index) => (
          <li key={index} className="kept-together py-3">
            <p className="tone-gap">
              {seq === undefined
                ? ''
                : `${isShelf(log) ? 'Shelf, line' : 'Entry'} ${seq}${part === undefined ? '' : `, ${part}`}: `}
              <UserText>{cut(sentence)}</UserText>
            </p>
            <TechnicalLine>
              <p className="font-mono text-sm break-all">
                {code}: <bdi>{cut(technical)}</bdi>
              </p>
              <p>{alterationCodes[code]}</p>
            </TechnicalLine>
          </li>
        ))}
      </ol>
    </section>
  );
}
