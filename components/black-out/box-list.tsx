'use client';

import { Button } from '@/components/ui/button';
import type { PictureBox } from '@/lib/domain/black-boxes';
import { boxWords, isArrow } from './box-state';

export interface BoxListProps {
  boxes: readonly PictureBox[];
  onKey: (index: number, key: string, isSizing: boolean) => void;
  onRemove: (index: number) => void;
  /** Which box has the keyboard; null once it has left. */
  onCurrent: (index: number | null) => void;
}

/** Every box in words, each with the keys that move and size it and a button that takes it away. */
export function BoxList({ boxes, onKey, onRemove, onCurrent }: BoxListProps) {
  if (boxes.length === 0) return null;
  return (
    <section aria-label="Boxes">
      <p id="box-keys" className="tag mb-2">
        Arrow keys move a box, Shift and arrow keys size it.
      </p>
      <ul className="grid gap-2">
        {boxes.map((box, index) => (
          <li key={index} className="flex flex-wrap items-center gap-2">
            <button
              type="button"
              data-box={index}
              aria-describedby="box-keys"
              className="min-h-11 min-w-0 grow basis-60 border border-line bg-sheet px-3 py-1.5 text-left"
              onFocus={() => onCurrent(index)}
              onBlur={() => onCurrent(null)}
              onKeyDown={(event) => {
                if (!isArrow(event.key)) return;
                event.preventDefault();
                onKey(index, event.key, event.shiftKey);
              }}
            >
              {boxWords(box, index)}
            </button>
            <Button onClick={() => onRemove(index)} aria-label={`Remove box ${index + 1}`}>
              Remove
            </Button>
          </li>
        ))}
      </ul>
    </section>
  );
}
