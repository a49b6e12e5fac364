'use client';

import { loadChecker } from './load-checker';
import { usePublishedKeys } from './use-published-keys';
import { VerifyTool } from './verify-tool';

/** The check on a page that an installation serves: it can also say which keys that installation publishes. */
export function ServedVerifyTool({ host, version }: { host: string; version: string }) {
  const published = usePublishedKeys();
  return <VerifyTool load={loadChecker} published={published} checkedWith={{ kind: 'served', host, version }} />;
}
