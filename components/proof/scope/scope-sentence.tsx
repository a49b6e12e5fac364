import type { ScopeEffect } from '@/lib/domain/scope-effect';

export interface ScopeSentenceProps {
  id: string;
  effect: ScopeEffect;
  preview: string;
}

const counted = (count: number, one: string, many: string) => `${count} ${count === 1 ? one : many}`;

function stayOpen({ pictures, texts }: ScopeEffect): string {
  const what = [
    ...(pictures === 0 ? [] : [counted(pictures, 'picture', 'pictures')]),
    ...(texts === 0 ? [] : [counted(texts, 'note or statement', 'notes and statements')]),
  ].join(' and ');
  if (what === '') return 'No picture, note or statement stays open.';
  const stays = pictures + texts === 1 ? 'stays' : 'stay';
  return `${what} ${stays} open. Pictures and your own words, titles too, can show names, prices or plates: look before you share.`;
}

/** What the choice does, said while it is made. */
export function ScopeSentence({ id, effect, preview }: ScopeSentenceProps) {
  const { opened, withheld } = effect;
  const of = opened + withheld;
  return (
    <div className="border-l-4 border-l-petrol pl-4">
      <p id={id} role="status" className="min-h-[1.5em] font-semibold">
        Opens {opened} of {counted(of, 'entry', 'entries')}; {withheld} shown as withheld.
      </p>
      <p className="tag mt-1">{stayOpen(effect)} Names of shops stay: they are businesses.</p>
      <a href={preview} target="_blank" rel="noopener" className="link inline-flex min-h-11 items-center">
        See what the reader sees (opens a new tab)
      </a>
    </div>
  );
}
