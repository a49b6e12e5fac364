import type { FormAction } from '@/components/account/form-shell';
import { Sheet } from '@/components/ui/box';
import { formatInstant } from '@/lib/domain/instants';
import type { ListedKeeper } from '@/lib/services/list-keepers';
import { AskKeeper } from './ask-keeper';
import { ConfirmButton } from './confirm-button';

export interface CheckpointKeepersProps {
  machine: string;
  keepers: ListedKeeper[];
  zone: string;
  ask: FormAction;
  remove: FormAction;
}

function stateWords({ addedAt, confirmedAt, last, waiting }: ListedKeeper, zone: string): string {
  if (confirmedAt === null)
    return `Asked ${formatInstant(addedAt, zone)}. Nobody there has said yes, so nothing is sent.`;
  const since = `Keeps checkpoints since ${formatInstant(confirmedAt, zone)}.`;
  const sent =
    last === null ? 'None was due yet.' : `Last mailed: ${last.size} entries, ${formatInstant(last.sentAt, zone)}.`;
  const late =
    waiting === null
      ? ''
      : ` The mail with ${waiting.size} entries could not be sent yet; tried again ${formatInstant(waiting.nextTryAt, zone)}.`;
  return `${since} ${sent}${late}`;
}

/** Addresses that are mailed each new checkpoint of this machine's record, and a form to ask another. */
export function CheckpointKeepers({ machine, keepers, zone, ask, remove }: CheckpointKeepersProps) {
  return (
    <section aria-labelledby="keepers" className="mt-10">
      <h2 id="keepers">Checkpoint keepers</h2>
      <p className="mt-1 mb-4 max-w-[70ch]">
        Somebody you trust, or a second address of your own, can keep the record’s length and root outside this server:
        a short mail after each new entry, without a word of what it says. Whoever rewrote the record would be
        contradicted by those mails. They prove no time, and count as much as their keeper is believed.
      </p>
      <div className="mb-5 max-w-[36rem]">
        <AskKeeper action={ask} machine={machine} />
      </div>
      {keepers.length === 0 ? (
        <p className="tag">Nobody keeps checkpoints of this record yet.</p>
      ) : (
        <Sheet>
          <ul role="list" className="divide-y divide-hair">
            {keepers.map((keeper) => (
              <li key={keeper.id} className="flex flex-wrap items-center justify-between gap-x-5 gap-y-2 px-4 py-3">
                <div className="min-w-0 flex-1 basis-56">
                  <p className={keeper.confirmedAt === null ? 'break-all text-soft' : 'font-semibold break-all'}>
                    {keeper.email}
                  </p>
                  <p className="tag">{stateWords(keeper, zone)}</p>
                </div>
                <ConfirmButton
                  action={remove}
                  name="keeper"
                  value={keeper.id}
                  text="Remove"
                  busyText="Removing"
                  label={`Remove ${keeper.email}`}
                  title="Remove this keeper?"
                >
                  <p>
                    <span className="break-all">{keeper.email}</span> gets no more mails about this record. Those sent
                    already stay where they are.
                  </p>
                </ConfirmButton>
              </li>
            ))}
          </ul>
        </Sheet>
      )}
    </section>
  );
}
