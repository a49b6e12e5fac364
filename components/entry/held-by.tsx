import Link from 'next/link';
import { Definition, type DefinitionItem } from '@/components/ui/definition';
import { Hash } from '@/components/ui/hash';
import { partWords } from '@/lib/domain/erasure';
import { formatInstant } from '@/lib/domain/instants';
import type { PartName } from '@/lib/evidence/format';
import type { ErasureView, LogView, TokenView } from '@/lib/services/record-view';
import { stamperWords, stampToComeWords } from './words';

export interface HeldByProps {
  leafHash: string;
  previous?: string | null | undefined;
  tokens: TokenView[];
  /** Authorities whose stamp is still to come. */
  stampsToCome?: string[] | undefined;
  withheld: PartName[];
  erasures?: ErasureView[] | undefined;
  /** Leads to the entry that records an erasure. */
  entry?: ((seq: number) => string | undefined) | undefined;
  /** A record has entries, a shelf's log has lines. */
  what?: 'entry' | 'line';
  log: LogView;
  zone: string;
}

/** The hashes that hold an entry in its log, and who stamped it. */
export function HeldBy({
  leafHash,
  previous,
  tokens,
  stampsToCome = [],
  withheld,
  erasures = [],
  entry,
  what = 'entry',
  log,
  zone,
}: HeldByProps) {
  const stamps = tokens.map((token): DefinitionItem => ({
    term: 'Time stamp',
    detail: (
      <>
        {formatInstant(token.genTime, zone)}, <bdi>{stamperWords(token)}</bdi>
        <span className="block">
          <Hash value={token.sha256} what="SHA-256 of the time stamp" isCopyable={false} />
        </span>
      </>
    ),
  }));
  const named = stampsToCome.map(stampToComeWords);
  const toCome = named.length === 0 && stamps.length === 0 ? ['Still to come'] : named;
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
          ...stamps,
          ...toCome.map((detail): DefinitionItem => ({
            term: 'Time stamp',
            tone: 'warn',
            detail: <bdi>{detail}</bdi>,
          })),
          ...(withheld.length === 0 ? [] : [{ term: 'Withheld here', detail: withheld.join(', ') }]),
          ...erasures.map((one) =>
            erasedItem(one, zone, { name: `${what} ${one.recordedSeq}`, href: entry?.(one.recordedSeq) }),
          ),
        ]}
      />
    </section>
  );
}

function erasedItem(
  { name, erasedAt }: ErasureView,
  zone: string,
  { name: where, href }: { name: string; href: string | undefined },
): DefinitionItem {
  return {
    term: `Erased: ${partWords[name]}`,
    tone: 'warn',
    detail: (
      <>
        Erased for good on {formatInstant(erasedAt, zone)}, as recorded in{' '}
        {href === undefined ? (
          where
        ) : (
          <Link className="link" href={href}>
            {where}
          </Link>
        )}
        . Its digest stays in the leaf, so the record still verifies.
      </>
    ),
  };
}
