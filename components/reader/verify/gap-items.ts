import type { Finding } from '@/lib/evidence/finding';
import { type AboutLines, laterLines } from './about-lines';
import { entryWords } from './finding-words';
import type { PlainItem } from './plain-list';

/** More gaps than anybody reads; the entries name each of theirs. */
const mostListed = 100;

/** What the reader’s checks of the opened entries name as gaps. A struck entry is withdrawn, and its gaps with it. */
export function gapItems({ entries, logs }: Finding, about: AboutLines): PlainItem[] {
  const items = logs.flatMap(({ id, subject }) => {
    const own = entries.filter(({ log }) => log === id);
    const later = laterLines(own, about);
    return own
      .filter(({ seq }) => later.get(seq)?.struckBy == null)
      .flatMap((entry) => {
        const { title, gaps } = entryWords(entry);
        const where = `${subject === 'machine' ? 'Entry' : 'Shelf, line'} ${entry.seq}, ${title}`;
        return gaps.map((text) => ({ text, where }));
      });
  });
  if (items.length <= mostListed) return items;
  return [...items.slice(0, mostListed), { text: `And ${items.length - mostListed} more, named at each entry below.` }];
}
