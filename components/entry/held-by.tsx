import { Definition, type DefinitionItem } from '@/components/ui/definition';
import { Hash } from '@/components/ui/hash';
import { formatInstant } from '@/lib/domain/instants';
import type { PartName } from '@/lib/evidence/format';
import type { LogView, TokenView } from '@/lib/services/record-view';

export interface HeldByProps {
  leafHash: string;
  previous?: string | null | undefined;
  tokens: TokenView[];
  withheld: PartName[];
  log: LogView;
  zone: string;
}

/** The hashes that hold an entry in its log, and who stamped it. */
export function HeldBy({ leafHash, previous, tokens, withheld, log, zone }: HeldByProps) {
  const stamps = tokens.map(({ authority, genTime, isOwnAuthority, sha256 }): DefinitionItem => ({
    term: 'Time stamp',
    detail: (
      <>
        {formatInstant(genTime, zone)},{' '}
        {isOwnAuthority ? 'this installation’s own test authority, not independent' : <bdi>{authority}</bdi>}
        <span className="block">
          <Hash value={sha256} what="SHA-256 of the time stamp" isCopyable={false} />
        </span>
      </>
    ),
  }));
  return (
    <section className="mt-8">
      <h2 className="mb-2">What holds it</h2>
      <Definition
        label="What holds it"
        items={[
          { term: 'Leaf hash', detail: <Hash value={leafHash} what="leaf hash" /> },
          ...(previous === undefined
            ? []
            : [
                {
                  term: 'Leaf hash of the entry before',
                  detail: previous === null ? 'None: this is the first' : <Hash value={previous} isCopyable={false} />,
                },
              ]),
          {
            term: `Checkpoint over ${log.size} ${log.size === 1 ? 'entry' : 'entries'}`,
            detail: (
              <>
                <span className="font-mono text-sm break-all">{log.root}</span>
                <span className="tag block">
                  Signed by <bdi>{log.keyName}</bdi>, fingerprint{' '}
                  <span className="font-mono text-sm">{log.fingerprint}</span>
                </span>
              </>
            ),
          },
          ...(stamps.length > 0 ? stamps : [{ term: 'Time stamp', detail: 'Still to come', tone: 'warn' as const }]),
          ...(withheld.length === 0 ? [] : [{ term: 'Withheld here', detail: withheld.join(', ') }]),
        ]}
      />
    </section>
  );
}
