import Link from 'next/link';
import { LinkButton } from '@/components/ui/button';
import { Definition } from '@/components/ui/definition';
import { whatIsShown } from '@/lib/evidence/format';
import { paths } from '@/lib/paths';
import type { Viewing } from '@/lib/services/read-viewing';
import { MonoCopy } from './mono-copy';
import { CompareRecord } from './verify/compare-record';

const downloadLook =
  'inline-flex min-h-11 items-center justify-center rounded-cut border border-petrol px-4 py-2 text-center font-semibold leading-tight text-petrol hover:bg-petrol hover:text-petrol-ink';

/** How to check the record without trusting its owner or this installation. */
export function CheckItYourself({ viewing }: { viewing: Viewing }) {
  const { link, record, packet } = viewing;
  const { log } = record;
  return (
    <section aria-labelledby="check" className="mt-10">
      <h2 id="check" className="mb-2">
        Check it yourself
      </h2>
      <p className="max-w-[70ch]">
        You need to trust neither the owner nor this site. Download the record, then check it here in your own browser,
        or with the one-file program on your own computer, which needs nothing but Node.
      </p>
      <div className="not-printed mt-4 flex flex-wrap gap-2.5">
        <a href={paths.api.viewingBundle(link)} download="record.json" className={downloadLook}>
          Download record.json
        </a>
        {packet === null ? null : (
          <a href={paths.api.viewingPacket(link)} download className={downloadLook}>
            Download packet {packet.number}
          </a>
        )}
        <LinkButton href={paths.verify} prefetch={false}>
          Check a file
        </LinkButton>
      </div>
      {packet === null ? (
        <p className="tag mt-3">No packet goes with this link; record.json holds the same entries.</p>
      ) : packet.logSize !== null && packet.logSize < log.size ? (
        <p className="tag mt-3">
          The packet was built when the record had {packet.logSize} entries; it now has {log.size}.
        </p>
      ) : null}
      <div className="mt-5">
        <Definition
          label="What the check goes by"
          items={[
            {
              term: 'On your own computer',
              detail: (
                <>
                  <code className="font-mono text-sm">node verify.mjs record.json --key KEY</code>
                  <span className="tag block">
                    <Link href={paths.method} prefetch={false} className="link">
                      How the record is kept and checked
                    </Link>{' '}
                    has the program and its SHA-256.
                  </span>
                </>
              ),
            },
            { term: 'Log', detail: <MonoCopy text={`${log.origin}/${log.id}`} what="log" /> },
            { term: 'Key', detail: <MonoCopy text={log.verifierKey} what="verifier key" /> },
            {
              term: 'Fingerprint of the key',
              detail: (
                <>
                  <span className="font-mono text-sm">{log.fingerprint}</span>
                  <span className="tag block">
                    Compare it with one you got another way: a mail about this record, or an older packet. From this
                    page alone it proves nothing.
                  </span>
                </>
              ),
            },
          ]}
        />
      </div>
      <CompareRecord bundle={paths.api.viewingBundle(link)} />
      <p className="mt-6 max-w-[70ch] border-l-4 border-l-petrol pl-4">{whatIsShown}</p>
    </section>
  );
}
