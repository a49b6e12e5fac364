'use client';

import { useEffect, useState } from 'react';
import { paths } from '@/lib/paths';

/** Null while they are fetched, or when they cannot be. */
export type PublishedKeys = { verifierKey: string; fingerprint: string }[] | null;

/** The keys of the installation that serves this page, fetched when it opens, for a check without a connection later. */
export function usePublishedKeys(): PublishedKeys {
  const [keys, setKeys] = useState<PublishedKeys>(null);
  useEffect(() => {
    const asked = new AbortController();
    fetch(paths.api.logKeys, { signal: asked.signal })
      .then(async (response) => {
        const answer = (await response.json()) as { keys?: NonNullable<PublishedKeys> };
        setKeys(answer.keys ?? null);
      })
      .catch(() => {
        // Said on the page: the keys could not be compared.
      });
    return () => asked.abort();
  }, []);
  return keys;
}
