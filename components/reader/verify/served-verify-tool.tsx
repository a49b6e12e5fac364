'use client';

import { loadChecker } from './load-checker';
import { usePublishedKeys } from './use-published-keys';
import { VerifyTool } from './verify-tool';

/** The check on a page that an installation serves: it can also say which keys that installation publishes. */
export function ServedVerifyTool({ host, version }: { host: string; version: string }) {
  const published = usePublishedKeys();
  return (
    <>
      {/* The face of hashes is fetched when it is first drawn; later there may be no connection. */}
      <span aria-hidden className="sr-only font-mono">
        0
      </span>
      <VerifyTool load={loadChecker} published={published} checkedWith={{ kind: 'served', host, version }} />
    </>
  );
}
