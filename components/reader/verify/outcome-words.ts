import type { Finding, LogFinding } from '@/lib/evidence/finding';

const counted = (count: number, one: string, many: string) => `${count} ${count === 1 ? one : many}`;
const isOpened = ({ openedParts }: Finding['entries'][number]) => openedParts.some(({ name }) => name === 'body');

/** The outcome as a heading: no more than was shown, and with which key. */
export function outcomeTitle(finding: Finding, isKeyDoubted: boolean): string {
  const { outcome, alterations, key } = finding;
  if (outcome === 'unreadable') return 'This is no record that can be read';
  if (outcome === 'altered') {
    return alterations.every(({ code }) => code === 'unknown-key')
      ? 'Not signed with that key: nothing in it can be relied on'
      : 'Altered: this is not what was sealed';
  }
  if (isKeyDoubted) return 'It fits its own key; whose key that is, is not known';
  return key?.source === 'reader' ? 'Unchanged since it was sealed' : 'Unchanged, going by the key in the file itself';
}

/** What the outcome is about: a verdict only on what is whole. */
export function outcomeSentence(finding: Finding): string {
  const { outcome, alterations, counts } = finding;
  if (outcome === 'unreadable') return finding.sentence;
  if (outcome === 'altered') {
    return `${counted(alterations.length, 'thing is', 'things are')} not as sealed. What is named below counts; the rest was read all the same.`;
  }
  const isWhole = counts.entriesOpened === counts.entries && counts.partsWithheld === 0;
  return isWhole
    ? 'Every line, seal and part is what was sealed.'
    : 'Every line and seal, and every part that is opened, is what was sealed. Nothing is said about what is closed.';
}

/** `12 of 14 entries opened`, log by log: the machine’s first. */
export function openedWords({ entries, logs }: Finding): { log: LogFinding; words: string }[] {
  return logs.map((log) => {
    const own = entries.filter((entry) => entry.log === log.id);
    return { log, words: `${own.filter(isOpened).length} of ${counted(own.length, 'entry', 'entries')} opened` };
  });
}

/** How much of it is proven by somebody other than the installation. */
export function provenSentence({ entries }: Finding): string {
  const proven = entries.filter((entry) => entry.proven !== null).length;
  if (proven === 0) {
    return 'No entry has a proven time: when they were sealed is the word of the installation alone, and whoever runs it could have rebuilt the record.';
  }
  return proven === entries.length
    ? 'Every entry has a proven time, from a time-stamp authority whose root you brought.'
    : `${proven} of ${entries.length} entries have a proven time; of the others, the installation’s word is all there is.`;
}
