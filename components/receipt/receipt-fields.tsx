'use client';

import { useMemo } from 'react';
import { useDraftInScreen } from '@/components/garage/draft-context';
import { DraftFigure, DraftSelect, DraftText } from '@/components/garage/draft-fields';
import { mintId } from '@/components/garage/mint-id';
import { Button } from '@/components/ui/button';
import { receiptFrom } from '@/lib/domain/receipt';
import { ReceiptLineFields } from './receipt-line-fields';

// ISO 4217, the currencies receipts are most often in; the code is what stands on most of them.
const currencies = ['USD', 'EUR', 'GBP', 'CAD', 'AUD', 'NZD', 'CHF', 'SEK', 'NOK', 'DKK', 'PLN', 'CZK', 'JPY', 'ZAR'];

/** Supplier, day and lines, as the paper has them. */
export function ReceiptFields() {
  const { opened, view, problems, isAllShown } = useDraftInScreen();
  const receipt = useMemo(() => receiptFrom(view.fields), [view.fields]);
  const known = view.fields.currency;
  const offered = known && !currencies.includes(known) ? [...currencies, known] : currencies;
  return (
    <div className="space-y-5">
      <DraftText path="supplier/name" label="Supplier" isOptional />
      <div className="grid grid-cols-2 gap-3 *:min-w-0">
        <DraftText path="boughtOn/date" label="Date" type="date" />
        <DraftText path="boughtOn/time" label="Time" type="time" isOptional />
      </div>
      <section aria-label="Lines">
        <h2 className="mb-2 text-xl">Lines</h2>
        {isAllShown && problems.lines ? <p className="tone-gap mb-2">{problems.lines}</p> : null}
        <ol className="space-y-3">
          {receipt.lines.map((line, index) => (
            <ReceiptLineFields key={line.id} line={line} number={index + 1} />
          ))}
        </ol>
        <Button
          size="big"
          isWide
          className="mt-3"
          onClick={() => void opened.set({ [`lines/${mintId()}/position`]: String(receipt.lines.length + 1) })}
        >
          Add a line
        </Button>
      </section>
      <div className="grid grid-cols-2 gap-3">
        <DraftFigure path="total" label="Total" isOptional />
        <DraftSelect
          path="currency"
          label="Currency"
          options={[{ value: '', label: 'None chosen' }, ...offered.map((code) => ({ value: code, label: code }))]}
        />
      </div>
    </div>
  );
}
