import { LinkButton } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { paths } from '@/lib/paths';

export default function ShelfNotFound() {
  return (
    <>
      <PageHead label="Not found" title="There is no such shelf or receipt, or it is not shared with you" />
      <p className="max-w-[70ch]">Check the address for a missing letter, or ask whose shelf it is to share it.</p>
      <div className="mt-6">
        <LinkButton href={paths.start} look="main">
          Go to the bench
        </LinkButton>
      </div>
    </>
  );
}
