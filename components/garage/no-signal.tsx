import { LinkButton } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { PageHead } from '@/components/ui/page-head';
import { paths } from '@/lib/paths';
import { DraftList } from './draft-list';

/** Shown by the service worker in place of a page that needs the server. */
export function NoSignal() {
  return (
    <>
      <PageHead title="No signal here" />
      <Notice
        tone="warn"
        actions={
          <LinkButton href={paths.start} prefetch={false}>
            Try again
          </LinkButton>
        }
      >
        The page you asked for needs the server. Worksheets and receipts work without it and are sent later.
      </Notice>
      <div className="mt-8">
        <DraftList isPart />
      </div>
    </>
  );
}
