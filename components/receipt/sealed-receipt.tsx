import type { KeptDraft } from '@/components/garage/draft-store';
import { HashButton } from '@/components/garage/hash-button';
import { LinkButton } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { PageHead } from '@/components/ui/page-head';
import { paths } from '@/lib/paths';

/** What became of a receipt that is no longer open. */
export function SealedReceipt({ draft }: { draft: KeptDraft }) {
  if (draft.state === 'discarded')
    return <Notice title="This receipt was discarded">It is in no list any more.</Notice>;
  const seq = draft.sealed?.seq;
  return (
    <>
      <PageHead title={seq === undefined ? 'Sealed on the shelf' : `Sealed on the shelf as entry ${seq}`} />
      <p className="mb-5 max-w-[60ch]">
        Its lines are lots now: a worksheet can draw from them. Keep the paper all the same.
      </p>
      <div className="flex flex-wrap gap-2.5">
        {seq === undefined ? null : (
          <LinkButton size="big" look="main" href={paths.shelfEntry(draft.subject, seq)} prefetch={false}>
            Read the entry
          </LinkButton>
        )}
        <HashButton size="big" href="#new-receipt">
          Add another receipt
        </HashButton>
      </div>
    </>
  );
}
