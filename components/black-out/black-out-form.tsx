'use client';

import { useReducer, useRef, useState } from 'react';
import { flushSync } from 'react-dom';
import { FormShell, type FormAction } from '@/components/account/form-shell';
import { Button } from '@/components/ui/button';
import { Textarea } from '@/components/ui/textarea';
import { mostBoxes } from '@/lib/domain/black-boxes';
import { BoxList } from './box-list';
import { boxesAfter, middleBox, noBoxes } from './box-state';
import { DrawArea } from './draw-area';

export interface BlackOutFormProps {
  action: FormAction;
  hidden: Record<string, string>;
  picture: { src: string; alt: string };
}

/** Draw, look, seal. Boxes are kept here, so a refusal of the server loses none. */
export function BlackOutForm({ action, hidden, picture }: BlackOutFormProps) {
  const [{ boxes, past }, take] = useReducer(boxesAfter, noBoxes);
  const [current, setCurrent] = useState<number | null>(null);
  const [isPreview, setPreview] = useState(false);
  const part = useRef<HTMLDivElement>(null);
  const isFull = boxes.length >= mostBoxes;

  /** Moved by keys next, so the focus goes to it once it is there. */
  const addInTheMiddle = () => {
    flushSync(() => take({ do: 'add', box: middleBox }));
    part.current?.querySelector<HTMLButtonElement>(`[data-box="${boxes.length}"]`)?.focus();
  };

  return (
    <FormShell action={action} submit="Seal the blacked-out copy" busy="Sealing" label="Black out part of a picture">
      {({ fields, typed }) => (
        <>
          {Object.entries({ ...hidden, boxes: JSON.stringify(boxes) }).map(([field, value]) => (
            <input key={field} type="hidden" name={field} value={value} />
          ))}
          <div ref={part} className="grid gap-4">
            <p id="how-to-draw">Draw with a finger or the mouse over what is to be black.</p>
            <DrawArea
              {...picture}
              boxes={boxes}
              current={current}
              isPreview={isPreview}
              onDraw={(box) => take({ do: 'add', box })}
            />
            {fields.boxes === undefined ? null : (
              <p role="alert" className="tone-gap">
                {fields.boxes}
              </p>
            )}
            <div className="flex flex-wrap gap-2.5">
              <Button disabled={isFull} onClick={addInTheMiddle}>
                Add a box
              </Button>
              <Button disabled={past.length === 0} onClick={() => take({ do: 'undo' })}>
                Undo
              </Button>
              <Button aria-pressed={isPreview} onClick={() => setPreview(!isPreview)}>
                {isPreview ? 'Go on drawing' : 'Show as it will be'}
              </Button>
            </div>
            <p role="status" className="tag">
              {statusWords(boxes.length, isPreview)}
            </p>
            <BoxList
              boxes={boxes}
              onKey={(index, key, isSizing) => take({ do: 'change', index, key, isSizing })}
              onRemove={(index) => take({ do: 'remove', index })}
              onCurrent={setCurrent}
            />
          </div>
          <Textarea
            label="Reason"
            name="reason"
            isOptional
            hint="It is sealed and shown to every reader: leave out whatever the black is to hide."
            rows={2}
            maxLength={500}
            defaultValue={typed.reason}
            error={fields.reason}
          />
        </>
      )}
    </FormShell>
  );
}

function statusWords(count: number, isPreview: boolean): string {
  if (count === 0) return 'No box yet.';
  const words = count === 1 ? 'One box.' : `${count} boxes.`;
  if (count >= mostBoxes) return `${words} More do not fit on one picture.`;
  return isPreview ? `${words} Shown as the copy will be, outward to whole squares of 16 pixels.` : words;
}
