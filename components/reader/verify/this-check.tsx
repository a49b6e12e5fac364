import { Definition } from '@/components/ui/definition';
import { Hash } from '@/components/ui/hash';
import { UserText } from '@/components/ui/user-text';
import { bytesWords } from '@/components/entry/words';
import { formatInstant } from '@/lib/domain/instants';
import { signedRoot } from '@/lib/evidence/finding';
import type { Checked } from './check-file';
import { cut } from './cut';

/** What did the checking: a served page, or a copy opened from disk with the hash of its own program. */
export type CheckedWith =
  { kind: 'served'; host: string; version: string } | { kind: 'file'; program: string; version: string };

export interface ThisCheckProps {
  name: string;
  checked: Checked;
  checkedAt: Date;
  checkedWith: CheckedWith;
}

/** Which file, when, with what: so that a report on paper can be told from another, and the check done again. */
export function ThisCheck({ name, checked, checkedAt, checkedWith }: ThisCheckProps) {
  const { finding, sha256, bytes, roots } = checked;
  const { bundle, logs, counts } = finding;
  return (
    <section aria-labelledby="this-check" className="mt-6">
      <h3 id="this-check" className="mb-2">
        This check
      </h3>
      <Definition
        label="This check"
        items={[
          { term: 'File', detail: <UserText>{`${name}, ${bytesWords(bytes)}`}</UserText> },
          { term: 'SHA-256 of the file', detail: <Hash value={sha256} what="SHA-256 of the file" /> },
          ...(bundle === null
            ? []
            : [{ term: 'It says of itself', detail: <UserText>{cut(`${bundle.number}, made ${bundle.madeAt}${bundle.purpose === '' ? '' : `, for: ${bundle.purpose}`}`)}</UserText> }]),
          ...logs.map(({ id, subject, checkpoint }) => ({
            term: subject === 'machine' ? 'The machine’s log' : 'A shelf’s log',
            detail: (
              <span className="font-mono text-sm break-all">
                {id}
                {checkpoint === null ? ', no checkpoint that can be read' : `, size ${checkpoint.size}, root ${signedRoot(checkpoint)}`}
              </span>
            ),
          })),
          ...(bundle === null ? [] : [{ term: 'Parts', detail: `${counts.partsOpened} opened, ${counts.partsWithheld} withheld` }]),
          { term: 'Roots of time stamps', detail: roots === 0 ? 'None was brought, so no time stamp counts as independent' : `${roots} brought by the reader` },
          { term: 'Checked at', detail: `${formatInstant(checkedAt.toISOString(), 'UTC')} UTC, by this computer’s clock` },
          { term: 'Checked with', detail: <CheckedWithWords checkedWith={checkedWith} /> },
        ]}
      />
    </section>
  );
} // prettier-ignore

function CheckedWithWords({ checkedWith }: { checkedWith: CheckedWith }) {
  if (checkedWith.kind === 'served') {
    return `The page served by ${checkedWith.host}, Witnessmark ${checkedWith.version}. It may be the installation being checked.`;
  }
  return (
    <>
      A copy of verify.html opened from a file, Witnessmark {checkedWith.version}; SHA-256 of its check:{' '}
      <Hash value={checkedWith.program} what="SHA-256 of the check" />
    </>
  );
}
