import { ownSignatureWords } from '@/lib/domain/own-signature-words';
import { capacityWords } from '@/lib/domain/record-words';
import type { EntryView } from '@/lib/services/record-view';
import { addendumText, authorWords, counted } from './words';

function reasonOf(body: unknown): string {
  const reason = typeof body === 'object' && body !== null && 'reason' in body ? body.reason : undefined;
  return typeof reason === 'string' ? reason : '';
}

const longestExcerpt = 140;
/** A line's worth; the whole text stands on the entry's own page. Cut between characters as people see them. */
function shortened(text: string): string {
  const line = text.replaceAll(/\s+/g, ' ');
  const characters = [...new Intl.Segmenter().segment(line)].map(({ segment }) => segment);
  if (characters.length <= longestExcerpt) return /[.!?…]$/.test(line) || line === '' ? line : `${line}.`;
  return `${characters.slice(0, longestExcerpt).join('').trimEnd()} …`;
}

function signatureWords({ ownSignature }: EntryView): string {
  if (ownSignature?.result === 'fails') return 'The signature does not hold.';
  return `${ownSignatureWords}.`;
}

/** What a line says of an entry that is no service. */
export function quietDetail(entry: EntryView): string {
  const author = entry.author === null ? '' : authorWords(entry.author);
  if (entry.kind === 'countersignature' && entry.body !== null) {
    const own = entry.ownSignature?.result === 'holds' ? ' Signed with its own key.' : '';
    return `For entry ${entry.refersTo?.seq ?? ''}: ${capacityWords[entry.body.capacity]}.${own} ${author}`;
  }
  if (entry.kind === 'terms' && entry.body !== null) {
    const { schedule, fluidPoints, fasteners } = entry.body;
    return [
      counted(schedule.length, 'schedule item', 'schedule items'),
      counted(fluidPoints.length, 'fluid point', 'fluid points'),
      counted(fasteners.length, 'fastener', 'fasteners'),
    ].join(', ');
  }
  if (entry.withheld.includes('body')) return 'Its text is withheld.';
  if (entry.kind === 'signature') return signatureWords(entry);
  if (entry.kind === 'key') return 'Statements signed with it later are checked by this entry.';
  if (entry.kind === 'addendum') return `${shortened(addendumText(entry.body) ?? '')} ${author}`;
  if (entry.kind === 'strike') return `${shortened(reasonOf(entry.body))} ${author}`;
  return author;
}
