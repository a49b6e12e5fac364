import { Sheet } from '@/components/ui/box';
import { UserText } from '@/components/ui/user-text';
import { paths } from '@/lib/paths';
import type { StoreView } from '@/lib/services/read-store';

/** Each log that the database does not hold as it was given out: both sizes, both notes, and what to do. */
export function RollbackList({ rollbacks }: { rollbacks: StoreView['rollbacks'] }) {
  return (
    <Sheet>
      <ul role="list" className="divide-y divide-hair">
        {rollbacks.map(({ log, name, issued, stored, sentence }) => (
          <li key={log} className="grid gap-3 px-4 py-3.5">
            <div>
              <p className="font-semibold text-gap">
                {name === null ? 'A log that this database does not know' : <UserText>{name}</UserText>}: sealing is
                refused
              </p>
              <p className="max-w-[70ch]">{sentence}</p>
            </div>
            <div className="grid gap-3 md:grid-cols-2">
              <Note label="Given out" note={issued} none="The file that remembers it cannot be read." />
              <Note label="In the database" note={stored} none="Nothing of this log." />
            </div>
            <p className="tag max-w-[70ch]">
              Stop the server, move this database away and keep it, restore the newest backup (npm run restore), start
              again. If there is none with these entries, they are lost here: the owner’s packets, mails and checkpoint
              keepers still hold what was given out, and any newer record will contradict them. The published newest
              checkpoint: <code className="break-all">{paths.api.checkpoint(log)}</code>
            </p>
          </li>
        ))}
      </ul>
    </Sheet>
  );
}

function Note({ label, note, none }: { label: string; note: { size: number; note: string } | null; none: string }) {
  return (
    <div className="min-w-0">
      <p className="label">{note === null ? label : `${label}: ${note.size} entries`}</p>
      {note === null ? (
        <p>{none}</p>
      ) : (
        <pre className="hash mt-1 overflow-x-auto text-[0.8125rem] break-all whitespace-pre-wrap">{note.note}</pre>
      )}
    </div>
  );
}
