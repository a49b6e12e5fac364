import { ReaderChecks } from '@/components/review/reader-checks';
import { ServiceBoxes } from '@/components/review/service-boxes';
import { TaskLines } from '@/components/review/task-lines';
import type { ServiceBody } from '@/lib/evidence/format';
import type { EntryView } from '@/lib/services/record-view';
import { DrawTable } from './draw-table';
import { platesOfPurchase, type EntryFacts, type EntryLinks } from './entry-facts';
import { Plates } from './plates';
import { receiptsOf } from './record-ledger';
import { Said } from './said';
import { SaidOfReceipts } from './said-of-receipts';
import { ThreeTimes } from './three-times';

export interface ServiceEntryProps {
  entry: EntryView;
  body: ServiceBody;
  facts: EntryFacts;
  links: EntryLinks;
}

/** A sealed service: what was done, what shows it, what a sceptical reader would ask. */
export function ServiceEntry({ entry, body, facts, links }: ServiceEntryProps) {
  const { zone } = facts;
  const receipts = receiptsOf(entry, facts.purchases);
  const plates = [...entry.attachments, ...receipts.flatMap(platesOfPurchase)];
  const own = new Set(entry.attachments.map(({ copy }) => copy?.sha256));
  return (
    <>
      <ServiceBoxes body={body} />
      <div className="-mt-px">
        <ThreeTimes
          claimed={body.finishedAt}
          claimedLabel="Work finished, claimed"
          sealedAt={entry.sealedAt}
          tokens={entry.tokens}
          zone={zone}
        />
      </div>
      {plates.length === 0 ? (
        <p className="tag mt-4">No picture or paper is attached.</p>
      ) : (
        <section className="mt-6">
          <h2 className="sr-only">Plates</h2>
          <Plates
            attachments={plates}
            zone={zone}
            file={links.file}
            label="Plates: photos and receipts"
            blackOut={(copy) => (own.has(copy) ? links.blackOut?.(entry.seq, copy) : undefined)}
          />
        </section>
      )}
      <TaskLines tasks={body.tasks} zone={body.finishedAt.zone} />
      <DrawTable body={body} receipt={links.receipt} />
      <SaidOfReceipts purchases={receipts} zone={zone} />
      <ReaderChecks checks={body.checks} />
      <Said notes={entry.notes} statement={body.statement} author={entry.author} recorded={body.recorded} />
    </>
  );
}
