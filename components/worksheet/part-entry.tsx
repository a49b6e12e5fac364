'use client';

import { DraftItem, useDraftField } from '@/components/garage/draft-context';
import { ClearItem, DraftFigure, DraftText } from '@/components/garage/draft-fields';
import { parseNumber } from '@/lib/domain/units';
import { Button } from '@/components/ui/button';
import { DrawEntry } from './draw-entry';
import { useWorksheet } from './worksheet-context';

/** One part fitted: what, how many, from which lot. `spec` names a line of the spec sheet. */
export function PartEntry({ task, part }: { task: string; part: string }) {
  const { machine } = useWorksheet();
  const spec = machine?.terms?.parts.find((one) => one.part === part);
  const path = `tasks/${task}/parts/${part}`;
  const name = spec?.title ?? part.replaceAll('-', ' ').replace(/^./, (letter) => letter.toUpperCase());
  const quantity = useDraftField(`${path}/quantity`);
  const named = useDraftField(`${path}/name`);
  const isFitted = quantity.value !== '';
  const read = parseNumber(quantity.value);
  const isFree = spec === undefined && isUuid(part);
  return (
    <DraftItem path={path} seed={isFree ? {} : { name }}>
      <fieldset className="space-y-3">
        <legend className="figure mb-2 text-xl">{isFree ? 'Part' : name}</legend>
        {isFree ? <DraftText path={`${path}/name`} label="Name" /> : null}
        {isFitted || isFree ? (
          <PartFitted
            path={path}
            part={part}
            title={isFree ? named.value : name}
            amount={read.ok ? read.amount : undefined}
          />
        ) : (
          <FitNow path={path} quantity={spec?.quantity ?? '1'} />
        )}
      </fieldset>
    </DraftItem>
  );
}

const isUuid = (text: string): boolean => /^[0-9a-f]{8}-/.test(text);

function FitNow({ path, quantity }: { path: string; quantity: string }) {
  const { set } = useDraftField(`${path}/quantity`);
  return (
    <Button size="big" isWide onClick={() => set(quantity)}>
      Fitted, {quantity === '1' ? 'one new' : `${quantity} new`}
    </Button>
  );
}

interface PartFittedProps {
  path: string;
  part: string;
  title: string;
  amount: string | undefined;
}

function PartFitted({ path, part, title, amount }: PartFittedProps) {
  const { machine } = useWorksheet();
  const spec = machine?.terms?.parts.find((one) => one.part === part);
  const numbers = spec?.partNumbers ?? [];
  return (
    <>
      <div className="grid grid-cols-[7rem_minmax(0,1fr)] gap-3">
        <DraftFigure path={`${path}/quantity`} label="How many" isWhole />
        <DraftText
          path={`${path}/partNumber`}
          label="Part number"
          isOptional
          {...(numbers.length > 0 ? { hint: `Specified: ${numbers.join(', ')}.` } : {})}
        />
      </div>
      <DrawEntry
        item={path}
        kind="part"
        title={title}
        wanted={amount === undefined ? undefined : { amount, unit: '{piece}' }}
        {...(numbers.length > 0 ? { partNumbers: numbers } : {})}
      />
      <ClearItem path={path}>Not fitted</ClearItem>
    </>
  );
}
