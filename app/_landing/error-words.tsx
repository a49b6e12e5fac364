'use client';

import { Button } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { paths } from '@/lib/paths';

export interface ErrorPageProps {
  error: unknown;
  retry: () => void;
}

/** What the server logs beside the error; the reader can name it to whoever runs the installation. */
function digestOf(error: unknown): string | undefined {
  return error instanceof Error && 'digest' in error && typeof error.digest === 'string' ? error.digest : undefined;
}

export function ErrorWords({ error, retry }: ErrorPageProps) {
  const digest = digestOf(error);
  return (
    <>
      <PageHead label="Error" title="This page could not be shown" />
      <p>
        Something failed here, not with what you did. What was sealed before is unharmed, and a worksheet on this device
        keeps what you typed. Try again; if it fails again, tell whoever runs this installation
        {digest ? (
          <>
            {' '}
            and name <span className="font-mono text-sm">{digest}</span>
          </>
        ) : null}
        .
      </p>
      <div className="mt-6 flex flex-wrap gap-3">
        <Button look="main" onClick={() => retry()}>
          Try again
        </Button>
        {/* A full load, because the state of this page is what failed. */}
        <Button look="quiet" onClick={() => window.location.assign(paths.start)}>
          Go to the bench
        </Button>
      </div>
    </>
  );
}
