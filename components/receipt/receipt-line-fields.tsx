'use client';

import { DraftChoice, DraftFigure, DraftText, RemoveItem } from '@/components/garage/draft-fields';
import { useGarage } from '@/components/garage/garage-context';
import { useDraftField } from '@/components/garage/draft-context';
import { offeredVolumes } from '@/components/worksheet/fill-figures';
import type { ReceiptLine } from '@/lib/domain/receipt';
import { isUnitCode } from '@/lib/domain/units';

/** One line of the receipt. It becomes a lot once the receipt is confirmed. */
export function ReceiptLineFields({ line, number }: { line: ReceiptLine; number: number }) {
  const path = `lines/${line.id}`;
  const kind = useDraftField(`${path}/kind`).value;
  return (
    <li className="border border-line bg-sheet p-3">
      <fieldset className="space-y-3">
        <legend className="sr-only">Line {number}</legend>
        <p className="figure border-b border-hair pb-1 text-lg text-soft" aria-hidden="true">
          {number}
        </p>
        <DraftChoice
          path={`${path}/kind`}
          label="Kind"
          options={[
            { value: 'fluid', label: 'Fluid' },
            { value: 'part', label: 'Part' },
          ]}
        />
        <DraftText path={`${path}/product`} label="Product, as the receipt has it" />
        {kind === 'fluid' ? <FluidFields path={path} /> : null}
        {kind === 'part' ? <PartFields path={path} /> : null}
        <DraftFigure path={`${path}/price`} label="Price of the line" isOptional />
        <RemoveItem path={path}>Remove line {number}</RemoveItem>
      </fieldset>
    </li>
  );
}

function FluidFields({ path }: { path: string }) {
  const { view } = useGarage();
  const own = view.snapshot?.person.volumeUnit ?? 'L';
  const offered = offeredVolumes(isUnitCode(own) ? own : 'L', undefined);
  return (
    <>
      <DraftText path={`${path}/grade`} label="Grade" isOptional hint="Such as SAE 20W-50 or DOT 4." />
      <DraftFigure path={`${path}/containers`} label="How many bottles or cans" isWhole />
      <DraftFigure
        path={`${path}/containerSize/amount`}
        unitPath={`${path}/containerSize/unit`}
        offered={offered}
        label="Each holds"
      />
    </>
  );
}

function PartFields({ path }: { path: string }) {
  return (
    <div className="grid grid-cols-[7rem_minmax(0,1fr)] gap-3">
      <DraftFigure path={`${path}/quantity`} label="How many" isWhole />
      <DraftText path={`${path}/partNumber`} label="Part number" isOptional />
    </div>
  );
}
