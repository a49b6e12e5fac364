import { LinkButton } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { paths } from '@/lib/paths';

export default function MachineNotFound() {
  return (
    <>
      <PageHead label="Not found" title="There is no such machine or entry, or it is not shared with you" />
      <p className="max-w-[70ch]">
        Check the address for a missing letter. If a machine was handed over, its record went with it.
      </p>
      <div className="mt-6">
        <LinkButton href={paths.start} look="main">
          Go to the bench
        </LinkButton>
      </div>
    </>
  );
}
