import type { FormAction } from '@/components/account/form-shell';
import { KeyTable } from '@/components/reader/method-parts';
import { Notice } from '@/components/ui/notice';
import type { StoreView } from '@/lib/services/read-store';
import { RecordCheck } from './record-check';
import { RollbackList } from './rollback-list';

export interface StorePartProps {
  store: StoreView;
  zone: string;
  checkRecords: FormAction;
}

/** How the store stands: what stops sealing first, then the check of every record, then the keys. */
export function StorePart({ store, zone, checkRecords }: StorePartProps) {
  const { keys, keyTrouble, rollbacks, check } = store;
  return (
    <>
      {keyTrouble === null ? null : (
        <div className="mb-5">
          <Notice tone="gap" title="Nothing can be sealed: the signing key cannot be used. Reading goes on.">
            <p className="break-words">{keyTrouble}</p>
          </Notice>
        </div>
      )}
      {rollbacks.length === 0 ? null : (
        <section aria-labelledby="rolled-back" className="mb-8">
          <h2 id="rolled-back">The database is not what was given out</h2>
          <p className="mt-1 mb-4 max-w-[70ch]">
            Size and root of every log are kept beside the database as well. Where they do not fit, nothing is sealed:
            it would make two records out of one. Every other log goes on.
          </p>
          <RollbackList rollbacks={rollbacks} />
        </section>
      )}
      <section aria-labelledby="check" className="mb-8">
        <h2 id="check">Every record, checked</h2>
        <p className="mt-1 mb-4 max-w-[70ch]">
          Reads every entry, seal, part and time stamp from the database and every file from the disk, and checks them
          as a reader would. It changes nothing, and people can work meanwhile.
        </p>
        <RecordCheck action={checkRecords} initial={check} zone={zone} />
      </section>
      <section aria-labelledby="keys" className="mb-8">
        <h2 id="keys">Keys</h2>
        <p className="mt-1 mb-4 max-w-[70ch]">
          Newest first. A new one is made on the server with <code>npm run rotate-key</code>; the older ones stay
          published, because what they signed is checked with them.
        </p>
        <KeyTable keys={keys} />
      </section>
    </>
  );
}
