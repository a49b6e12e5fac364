import type { AboutLines } from '@/lib/evidence/about-lines';
import type { EntryFinding, Finding } from '@/lib/evidence/finding';
import { laterLines } from './about-lines';
import { entryWords } from './finding-words';
import type { PlainItem } from './plain-list';

/** More than anybody reads; each stands at its entry, too. */
const mostListed = 100;

/** What the reader’s checks of the opened entries name as gaps. A struck entry is withdrawn, and its gaps with it. */
export function gapItems({ entries, logs }: Finding, about: AboutLines): PlainItem[] {
  const items = logs.flatMap(({ id, subject }) => {
    const own = entries.filter(({ log }) => log === id);
    const later = laterLines(own, about);
    return own
      .filter(({ seq }) => later.get(seq)?.struckBy == null)
      .flatMap((entry) => entryWords(entry).gaps.map((text) => ({ text, where: whereOf(subject, entry) })));
  });
  return listed(items);
}

/** What was withdrawn: the entries below are many, and a line through one of them is soon passed over. */
export function struckItems({ entries, logs }: Finding, about: AboutLines): PlainItem[] {
  const items = logs.flatMap(({ id, subject }) => {
    const own = entries.filter(({ log }) => log === id);
    const later = laterLines(own, about);
    return own.flatMap((entry) => {
      const by = later.get(entry.seq)?.struckBy ?? null;
      return by === null ? [] : [{ where: whereOf(subject, entry), text: `Struck by entry ${by}: withdrawn` }];
    });
  });
  return listed(items);
}

const whereOf = (subject: string, entry: EntryFinding) =>
  `${subject === 'machine' ? 'Entry' : 'Shelf, line'} ${entry.seq}, ${entryWords(entry).title}`;

function listed(items: PlainItem[]): PlainItem[] {
  if (items.length <= mostListed) return items;
  return [...items.slice(0, mostListed), { text: `And ${items.length - mostListed} more, named at each entry below.` }];
}
