'use client';

import { useEffect, useState } from 'react';
import { paths } from '@/lib/paths';

/**
 * The keys of the installation that serves the page. `not-fetched`: it did not answer yet, or cannot. `not-asked`: the
 * page was opened from disk and asks nobody.
 */
export type PublishedKeys = { verifierKey: string; fingerprint: string }[] | 'not-fetched' | 'not-asked';

/** Fetched when the page opens, for a check without a connection later. */
export function usePublishedKeys(): PublishedKeys {
  const [keys, setKeys] = useState<PublishedKeys>('not-fetched');
  useEffect(() => {
    const asked = new AbortController();
    fetch(paths.api.logKeys, { signal: asked.signal })
      .then(async (response) => {
        const answer = (await response.json()) as { keys?: { verifierKey: string; fingerprint: string }[] };
        setKeys(answer.keys ?? 'not-fetched');
      })
      .catch(() => {
        // Said on the page: the keys could not be compared.
      });
    return () => asked.abort();
  }, []);
  return keys;
}
